import {
  attachmentRoles,
  type AttachmentRole,
  type PricesPart,
  type PurchaseBody,
  type PurchaseLine,
  type SupplierPart,
  type UnitCode,
} from '@/lib/evidence/format';
import { fieldTree, itemsOf, textAt, type FieldNode, type Fields } from './field-changes';
import { formatLocalDate, isLocalDate, isLocalTime, isZone, localDateOf } from './instants';
import { isCurrency, parseMoney } from './money';
import { Decimal, decimalText, isUnitCode, parseNumber, units } from './units';

export { foldChanges, type FieldChange, type Fields } from './field-changes';

/** Figures are texts as typed until the receipt is confirmed. */
export interface ReceiptLine {
  id: string;
  product?: string;
  kind: 'fluid' | 'part';
  grade?: string;
  standard?: string;
  partNumber?: string;
  batch?: string;
  containers?: string;
  containerSize: { amount?: string; unit?: UnitCode };
  quantity?: string;
  price?: string;
}
export interface Receipt {
  boughtOn: { date?: string; time?: string };
  zone?: string;
  supplier: { name?: string; address?: string };
  currency?: string;
  total?: string;
  lines: ReceiptLine[];
  photos: { uploadId: string; role?: AttachmentRole; caption?: string }[];
}

function texts<K extends string>(node: FieldNode, names: readonly K[], under = ''): { [N in K]?: string } {
  const found = names.map((name) => [name, textAt(node, under + name)] as const);
  return Object.fromEntries(found.filter(([, text]) => text !== undefined)) as { [N in K]?: string };
}

function lineOf({ id, node }: { id: string; node: FieldNode }): ReceiptLine {
  const kind = textAt(node, 'kind');
  const unit = textAt(node, 'containerSize/unit');
  const hasContainers = textAt(node, 'containers') !== undefined || textAt(node, 'containerSize/amount') !== undefined;
  return {
    id,
    // A line whose kind was not chosen is what its figures make it.
    kind: kind === 'fluid' || kind === 'part' ? kind : hasContainers ? 'fluid' : 'part',
    ...texts(node, ['product', 'grade', 'standard', 'partNumber', 'batch', 'containers', 'quantity', 'price']),
    containerSize: {
      ...texts(node, ['amount'], 'containerSize/'),
      ...(unit !== undefined && isUnitCode(unit) ? { unit } : {}),
    },
  };
}

/**
 * The receipt its fields describe; lines by position, then by id. Fields this version does not know are left out.
 *
 * @example receiptFrom({ 'lines/a/product': 'Fernhill 20W-50' }).lines[0]?.product // 'Fernhill 20W-50'
 */
export function receiptFrom(fields: Fields): Receipt {
  const root = fieldTree(fields);
  return {
    boughtOn: texts(root, ['date', 'time'], 'boughtOn/'),
    ...texts(root, ['zone', 'currency', 'total']),
    supplier: texts(root, ['name', 'address'], 'supplier/'),
    lines: itemsOf(root, 'lines').map(lineOf),
    photos: itemsOf(root, 'photos').map(({ id, node }) => {
      const role = attachmentRoles.find((one) => one === textAt(node, 'role'));
      return { uploadId: id, ...(role === undefined ? {} : { role }), ...texts(node, ['caption']) };
    }),
  };
}

/**
 * What keeps a receipt from being confirmed, by field; each sentence says what is wrong and what to do.
 *
 * @example receiptProblems(receiptFrom({}), { now })['boughtOn/date'] // 'Enter the day of the purchase, as the receipt has it.'
 */
export function receiptProblems(receipt: Receipt, { now }: { now: string }): Record<string, string> {
  const problems: Record<string, string> = {};
  const { boughtOn, zone, currency, total } = receipt;
  if (zone === undefined) problems.zone = 'Choose the time zone of the purchase.';
  else if (!isZone(zone)) problems.zone = `“${zone}” is not a time zone known here. Choose one from the list.`;
  if (boughtOn.date === undefined) problems['boughtOn/date'] = 'Enter the day of the purchase, as the receipt has it.';
  else if (!isLocalDate(boughtOn.date)) {
    problems['boughtOn/date'] = `${boughtOn.date} is not a day of the calendar. Enter it like 2026-04-18.`;
  } else if (problems.zone === undefined && zone !== undefined && boughtOn.date > localDateOf(now, zone)) {
    problems['boughtOn/date'] = `${formatLocalDate(boughtOn.date)} is in the future. Enter the day on the receipt.`;
  }
  if (boughtOn.time !== undefined && !isLocalTime(boughtOn.time)) {
    problems['boughtOn/time'] = `${boughtOn.time} is not a time of day. Enter it like 15:53.`;
  }
  const hasPrice = total !== undefined || receipt.lines.some(({ price }) => price !== undefined);
  if (hasPrice && currency === undefined) problems.currency = 'Choose the currency of the prices.';
  else if (currency !== undefined && !isCurrency(currency))
    problems.currency = `“${currency}” is not a currency. Choose one, like USD.`;
  else if (currency !== undefined && total !== undefined) noteMoney(problems, 'total', total, currency);
  if (receipt.lines.length === 0) problems.lines = 'Add at least one line: what was bought.';
  for (const line of receipt.lines)
    lineProblems(line, problems.currency === undefined ? currency : undefined, problems);
  return problems;
}

function noteMoney(problems: Record<string, string>, field: string, text: string, currency: string): void {
  const money = parseMoney(text, currency);
  if (!money.ok) problems[field] = money.error;
}

const mostContainers = 9999;

function lineProblems(line: ReceiptLine, currency: string | undefined, problems: Record<string, string>): void {
  const at = `lines/${line.id}`;
  if (line.product === undefined)
    problems[`${at}/product`] = 'Name the product as the receipt does, or remove this line.';
  if (line.price !== undefined && currency !== undefined) noteMoney(problems, `${at}/price`, line.price, currency);
  if (line.kind === 'part') {
    const quantity = wholeNumber(line.quantity);
    if (quantity === undefined) problems[`${at}/quantity`] = 'Enter how many pieces, as a whole number.';
    return;
  }
  if (wholeNumber(line.containers) === undefined) {
    problems[`${at}/containers`] = 'Enter how many bottles or cans, as a whole number.';
  }
  const { amount, unit } = line.containerSize;
  const size = amount === undefined ? undefined : parseNumber(amount);
  if (size === undefined) problems[`${at}/containerSize/amount`] = 'Enter what one bottle or can holds.';
  else if (!size.ok) problems[`${at}/containerSize/amount`] = size.error;
  else if (new Decimal(size.amount).lte(0))
    problems[`${at}/containerSize/amount`] = 'A bottle or can holds more than nothing. Enter its size.';
  if (unit === undefined) problems[`${at}/containerSize/unit`] = 'Choose the unit the bottle or can is marked in.';
  else if (units[unit].dimension !== 'volume' && units[unit].dimension !== 'mass') {
    problems[`${at}/containerSize/unit`] = `${units[unit].label} does not measure a fluid. Choose another unit.`;
  }
}

function wholeNumber(text: string | undefined): number | undefined {
  const parsed = text === undefined ? undefined : parseNumber(text);
  if (parsed === undefined || !parsed.ok) return undefined;
  const number = new Decimal(parsed.amount);
  return number.isInteger() && number.gt(0) && number.lte(mostContainers) ? number.toNumber() : undefined;
}

/**
 * The parts of a purchase entry. Lines are numbered from 1 in their order; supplier and prices are absent when nothing
 * was entered.
 *
 * @throws RangeError for a receipt with problems
 * @example purchaseFrom(receiptFrom(fields)).body.lines[0]?.line // 1
 */
export function purchaseFrom(receipt: Receipt): { body: PurchaseBody; supplier?: SupplierPart; prices?: PricesPart } {
  const { date, time } = receipt.boughtOn;
  const { zone, currency, total, supplier } = receipt;
  if (date === undefined || zone === undefined) throw new RangeError('A purchase needs its day and time zone.');
  const prices =
    currency === undefined
      ? undefined
      : {
          currency,
          ...(total === undefined ? {} : { total: minor(total, currency) }),
          lines: receipt.lines.flatMap(({ price }, index) =>
            price === undefined ? [] : [{ line: index + 1, price: minor(price, currency) }],
          ),
        };
  const hasPrices = prices !== undefined && (prices.total !== undefined || prices.lines.length > 0);
  return {
    body: {
      boughtOn: { date, ...(time === undefined ? {} : { time }), zone },
      lines: receipt.lines.map((line, index) => purchaseLine(line, index + 1)),
    },
    ...(supplier.name === undefined ? {} : { supplier: { ...supplier, name: supplier.name } }),
    ...(hasPrices ? { prices } : {}),
  };
}

function minor(text: string, currency: string): string {
  const money = parseMoney(text, currency);
  if (!money.ok) throw new RangeError(money.error);
  return money.minor;
}

function purchaseLine(receiptLine: ReceiptLine, line: number): PurchaseLine {
  const { product, kind, grade, standard, partNumber, batch, containerSize } = receiptLine;
  if (product === undefined) throw new RangeError(`Line ${line} names no product.`);
  const stated = Object.fromEntries(
    Object.entries({ grade, standard, partNumber, batch }).filter(([, value]) => value !== undefined),
  );
  if (kind === 'part') {
    const quantity = wholeNumber(receiptLine.quantity);
    if (quantity === undefined) throw new RangeError(`Line ${line} has no number of pieces.`);
    return { line, product, kind, ...stated, quantity: decimalText(new Decimal(quantity)) };
  }
  const containers = wholeNumber(receiptLine.containers);
  const size = parseNumber(containerSize.amount ?? '');
  if (containers === undefined || !size.ok || containerSize.unit === undefined) {
    throw new RangeError(`Line ${line} has no containers or no container size.`);
  }
  return {
    line,
    product,
    kind,
    ...stated,
    containers,
    containerSize: { amount: size.amount, unit: containerSize.unit },
  };
}

import { balanceAfter, lotAmount } from '@/lib/domain/shelf';
import { formatAmount, sumAmounts, units } from '@/lib/domain/units';
import type { Amount, Draw } from '@/lib/evidence/format';
import type { RecordView } from '@/lib/services/record-view';
import { purchasesOf, type ServiceEntry } from '../content';
import { counted, productWords } from '../words';
import type { Opened } from './opened';

export interface UseSummary {
  what: string;
  bought: string;
  used: string;
  left: string;
  uncovered: string;
}

interface Use {
  seq: number;
  what: string;
  draws: Draw[];
  uncovered?: Amount;
}

function usesIn(services: ServiceEntry[]): Use[] {
  return services.flatMap(({ seq, body }) =>
    (body?.tasks ?? []).flatMap((task) => [
      ...task.fills.map((fill) => ({
        ...fill,
        seq,
        what: productWords(fill.product ?? fill.pointTitle, fill.grade),
      })),
      ...task.parts.map((part) => ({ ...part, seq, what: [part.name, part.partNumber].filter(Boolean).join(', ') })),
    ]),
  );
}

/** Purchases against use, a line for each product bought, then one for each thing used without a receipt. */
export function usesOf(record: RecordView, services: ServiceEntry[], opened: Opened): UseSummary[] {
  const uses = usesIn(services);
  const draws = uses.flatMap(({ seq, draws }) => draws.map((draw) => ({ ...draw, seq })));
  const lots = purchasesOf(record).flatMap(({ log, seq, body }) =>
    body.lines.map((line) => {
      const what = productWords(line.product, line.kind === 'fluid' ? line.grade : line.partNumber);
      const drawn = draws.filter(
        (one) => one.purchase.log === log && one.purchase.seq === seq && one.line === line.line,
      );
      return { what, receipt: `${log} ${seq}`, bought: boughtIn(line), drawn };
    }),
  );
  const used = new Set(lots.filter(({ drawn }) => drawn.length > 0).map(({ what }) => what));
  // Every line of the receipts printed here counts as bought, so that adding them up gives the same figure.
  const covered = [...used].map((what) => {
    const same = lots.filter((lot) => lot.what === what && lot.bought !== null);
    const drawn = same.flatMap((lot) => lot.drawn);
    const bought = sumSafely(same.flatMap((lot) => lot.bought ?? []));
    const drawnSum = sumSafely(drawn, bought?.unit);
    const receipts = new Set(same.map(({ receipt }) => receipt)).size;
    const times = new Set(drawn.map(({ seq }) => seq)).size;
    const isComparable =
      bought !== null && drawnSum !== null && units[bought.unit].dimension === units[drawnSum.unit].dimension;
    return {
      what,
      bought: `${amountWords(bought)}, ${counted(receipts, 'receipt', 'receipts')}`,
      used: `${amountWords(drawnSum)}, ${counted(times, 'service', 'services')}`,
      // What a withheld entry drew from the same receipts is not known here.
      left: isComparable && opened.unjudged === 0 ? amountWords(balanceAfter(bought, [drawnSum])) : '',
      uncovered: '',
    };
  });
  const without = uses.flatMap(({ what, uncovered, seq }) =>
    uncovered === undefined ? [] : [{ what, uncovered, seq }],
  );
  const bare = [...new Set(without.map(({ what }) => what))].map((what) => {
    const same = without.filter((use) => use.what === what);
    const used = amountWords(sumSafely(same.map(({ uncovered }) => uncovered)));
    const seqs = [...new Set(same.map(({ seq }) => seq))];
    const where = `${seqs.length === 1 ? 'entry' : 'entries'} ${seqs.join(', ')}`;
    return { what, bought: 'no receipt', used: `${used}, ${where}`, left: '', uncovered: 'gap' };
  });
  return [...covered, ...bare];
}

function boughtIn(line: Parameters<typeof lotAmount>[0]): Amount | null {
  try {
    return lotAmount(line);
  } catch {
    return null;
  }
}

/** Null where amounts of different kinds stand under one name: then no sum is claimed. */
function sumSafely(amounts: Amount[], unit?: Amount['unit']): Amount | null {
  try {
    return sumAmounts(amounts, unit);
  } catch {
    return null;
  }
}
const amountWords = (amount: Amount | null) => (amount === null ? 'several kinds' : formatAmount(amount));

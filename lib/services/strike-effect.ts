import 'server-only';
import type { Transaction } from '@/db/index';
import { erasuresRecordedBy } from '@/db/queries/erasures';
import { drawsFrom, drawsOfEntries, linesOf, struckEntriesOf, type LogLine } from '@/db/queries/lots';
import type { DrawRow, LogRow } from '@/db/models/logs';
import { mayBeStruck, struckLines } from '@/lib/domain/standing';
import { balanceAfter } from '@/lib/domain/shelf';
import { Decimal, formatAmount, isUnitCode } from '@/lib/domain/units';
import { notFound } from '@/lib/errors';
import type { Amount } from '@/lib/evidence/format';
import { openedPart } from './opened-part';
import { lotsOfLog } from './read-shelf-lots';

/** What a strike of one line would come to. */
export interface StrikeEffect {
  target: LogLine;
  /** The log as it is, and as it would be read with the strike at its end. */
  lines: LogLine[];
  linesAfter: LogLine[];
  /** Lines that would be withdrawn, and lines that would stand again because a strike of theirs is withdrawn. */
  withdrawn: LogLine[];
  standingAgain: LogLine[];
  /** Draws of standing entries, on any machine, from purchases that would be withdrawn. */
  drawnFrom: DrawRow[];
  /** Why it cannot be done. */
  refusal: string | null;
}

/** Judges a strike before it is made; inside the sealing transaction it is judged again. */
export async function strikeEffect(options: {
  log: LogRow;
  seq: number;
  transaction?: Transaction;
}): Promise<StrikeEffect> {
  const { log, seq, transaction } = options;
  const lines = await linesOf(log.id, transaction);
  const target = lines[seq];
  if (target === undefined) throw notFound('entry');
  const linesAfter = [...lines, virtualStrike(target, lines.length)];
  const [before, after] = [struckBy(lines), struckBy(linesAfter)];
  const withdrawn = lines.filter(({ entry }) => after.has(entry.seq) && !before.has(entry.seq));
  const standingAgain = lines.filter(({ entry }) => before.has(entry.seq) && !after.has(entry.seq));
  const drawnFrom = await standingDraws(log.id, withdrawn, transaction);
  const effect = { target, lines, linesAfter, withdrawn, standingAgain, drawnFrom };
  const refusal =
    refusalOfKind(log, target, before) ??
    ((await erasuresRecordedBy(log.id, seq, transaction)).length > 0
      ? `${nameOf(log, seq)} records that something was erased. What is erased cannot come back, so this cannot be struck.`
      : null) ??
    refusalOfTerms(lines, before, after) ??
    (drawnFrom.length > 0
      ? 'Something of this receipt is used by entries that stand. Strike those entries first; then the receipt can be struck.'
      : null) ??
    (await refusalOfDraws(log, effect, transaction));
  return { ...effect, refusal };
}

const struckBy = (lines: readonly LogLine[]) => struckLines(lines.map(({ entry }) => entry));
const nameOf = (log: LogRow, seq: number) => `${log.subject === 'machine' ? 'Entry' : 'Line'} ${seq}`;

function virtualStrike({ entry }: LogLine, seq: number): LogLine {
  return { entry: { ...entry, seq, kind: 'strike', refersToSeq: entry.seq }, parts: new Map<string, string>() };
}

function refusalOfKind(log: LogRow, { entry }: LogLine, struck: ReadonlyMap<number, number>): string | null {
  const by = struck.get(entry.seq);
  if (by !== undefined) {
    const strike = nameOf(log, by).toLowerCase();
    return `This is struck already, by ${strike}. To let it stand again, strike ${strike}.`;
  }
  if (mayBeStruck(entry.kind)) return null;
  if (entry.kind === 'opening') return 'The opening cannot be struck: the whole record stands on it. Add a correction.';
  if (entry.kind === 'countersignature') {
    return 'A countersignature is the shop’s word, so an owner cannot strike it. If the entry it is about is wrong, strike that one.';
  }
  return 'This kind of entry cannot be struck. Add an addendum that says what is wrong.';
}

/** Without terms no service could be sealed any more. */
function refusalOfTerms(lines: LogLine[], before: Map<number, number>, after: Map<number, number>): string | null {
  const hasTerms = (struck: Map<number, number>) =>
    lines.some(({ entry }) => entry.kind === 'terms' && !struck.has(entry.seq));
  if (!hasTerms(before) || hasTerms(after)) return null;
  return 'No terms would be left to judge a service by. Seal the right terms first, then strike these.';
}

async function standingDraws(shelfLog: string, withdrawn: LogLine[], transaction?: Transaction): Promise<DrawRow[]> {
  const seqs = new Set(withdrawn.filter(({ entry }) => entry.kind === 'purchase').map(({ entry }) => entry.seq));
  if (seqs.size === 0) return [];
  const rows = (await drawsFrom(shelfLog, transaction)).filter(({ purchaseSeq }) => seqs.has(purchaseSeq));
  const struck = await struckEntriesOf([...new Set(rows.map(({ machineLog }) => machineLog))], transaction);
  return rows.filter(({ machineLog, entrySeq }) => !struck.has(`${machineLog}:${entrySeq}`));
}

/** What stands again takes again, and others may have used it meanwhile. */
async function refusalOfDraws(
  log: LogRow,
  { standingAgain }: Pick<StrikeEffect, 'standingAgain'>,
  transaction?: Transaction,
): Promise<string | null> {
  const taken = [
    ...(await drawsOfEntries(log.id, standingAgain.map(({ entry }) => entry.seq), transaction)),
    ...standingAgain.flatMap((line) => takenOnShelf(log.id, line)),
  ]; // prettier-ignore
  for (const shelfLog of new Set(taken.map((one) => one.shelfLog))) {
    const lots = await lotsOfLog(shelfLog, transaction);
    for (const { purchaseSeq, line } of taken.filter((one) => one.shelfLog === shelfLog)) {
      const lot = lots.find((one) => one.seq === purchaseSeq && one.line === line);
      const same = taken.filter(
        (one) => one.shelfLog === shelfLog && one.purchaseSeq === purchaseSeq && one.line === line,
      );
      if (lot === undefined)
        return `It drew from receipt ${purchaseSeq}, which is struck meanwhile. Strike that strike first.`;
      const left = balanceAfter(lot.balance, same.flatMap(amountOf));
      if (new Decimal(left.amount).gte(0)) continue;
      return (
        `It drew from lot ${purchaseSeq} (${lot.product}), of which only ${formatAmount(lot.balance)} is left: ` +
        'others have used it meanwhile. Strike what uses it first.'
      );
    }
  }
  return null;
}

type Take = Pick<DrawRow, 'shelfLog' | 'purchaseSeq' | 'line' | 'amount' | 'unit'>;
const amountOf = ({ amount, unit }: Take): Amount[] => (isUnitCode(unit) ? [{ amount, unit }] : []);

function takenOnShelf(shelfLog: string, line: LogLine): Take[] {
  const { kind, refersToSeq } = line.entry;
  if ((kind !== 'disposal' && kind !== 'correction') || refersToSeq === null) return [];
  const body = openedPart<Partial<Amount & { line: number }>>(line, 'body');
  if (body?.amount === undefined || body.unit === undefined || body.line === undefined) return [];
  return [{ shelfLog, purchaseSeq: refersToSeq, line: body.line, amount: body.amount, unit: body.unit }];
}

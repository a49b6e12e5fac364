import 'server-only';
import type { Transaction } from '@/db/index';
import { drawsFrom, linesOf, standingLines, struckEntriesOf } from '@/db/queries/lots';
import { findLogOf } from '@/db/queries/logs';
import { shelfById } from '@/db/queries/shelves';
import type { PersonRow } from '@/db/models/people';
import { authorise } from '@/lib/auth/guard';
import { lotKey, lotsOf, type Lot, type Purchase, type Taken } from '@/lib/domain/shelf';
import { isUnitCode } from '@/lib/domain/units';
import type { Amount, PurchaseBody, SupplierPart } from '@/lib/evidence/format';
import { notFound } from '@/lib/errors';
import { openedPart as opened } from './opened-part';

export interface ShelfLot extends Lot {
  supplier?: string;
}
export interface ShelfLots {
  id: string;
  name: string;
  log: string;
  lots: ShelfLot[];
}

/**
 * The lots of a shelf with their exact balances. Read inside the sealing transaction, no draw of another worksheet can
 * come between. Struck purchases are left out, and a struck entry gives back what it drew.
 */
export async function lotsOfLog(shelfLog: string, transaction?: Transaction): Promise<ShelfLot[]> {
  const standing = standingLines(await linesOf(shelfLog, transaction));
  const suppliers = new Map<number, string>();
  const purchases = standing.flatMap((line): Purchase[] => {
    const body = line.entry.kind === 'purchase' ? opened<PurchaseBody>(line, 'body') : undefined;
    if (body === undefined) return [];
    const supplier = opened<SupplierPart>(line, 'supplier')?.name;
    if (supplier !== undefined) suppliers.set(line.entry.seq, supplier);
    return [{ log: shelfLog, seq: line.entry.seq, leafHash: line.entry.leafHash, body }];
  });
  const otherwiseTaken = standing.flatMap((line): Taken[] => {
    const { kind, refersToSeq } = line.entry;
    if ((kind !== 'disposal' && kind !== 'correction') || refersToSeq === null) return [];
    const body = opened<Partial<Amount & { line: number }>>(line, 'body');
    // A correction that only says that something was erased takes nothing.
    if (body?.amount === undefined || body.unit === undefined || body.line === undefined) return [];
    const lot = lotKey({ log: shelfLog, seq: refersToSeq, line: body.line });
    return [{ lot, amount: body.amount, unit: body.unit }];
  });
  const taken = [...(await drawnFrom(shelfLog, transaction)), ...otherwiseTaken];
  return lotsOf(purchases, taken).map((lot) => {
    const supplier = suppliers.get(lot.seq);
    return supplier === undefined ? lot : { ...lot, supplier };
  });
}

async function drawnFrom(shelfLog: string, transaction?: Transaction): Promise<Taken[]> {
  const rows = await drawsFrom(shelfLog, transaction);
  const struck = await struckEntriesOf([...new Set(rows.map((row) => row.machineLog))], transaction);
  return rows.flatMap((row) => {
    if (struck.has(`${row.machineLog}:${row.entrySeq}`) || !isUnitCode(row.unit)) return [];
    const lot = lotKey({ log: shelfLog, seq: row.purchaseSeq, line: row.line });
    return [{ lot, amount: row.amount, unit: row.unit }];
  });
}

/** A shelf with its lots, for one of its people. */
export async function readShelfLots(options: { person: PersonRow; shelf: string }): Promise<ShelfLots> {
  await authorise({ person: options.person, action: 'read-shelf', shelf: options.shelf });
  return shelfWithLots(options.shelf);
}

/** The same without asking who reads: for callers that have asked. */
export async function shelfWithLots(shelfId: string, transaction?: Transaction): Promise<ShelfLots> {
  const shelf = await shelfById(shelfId, transaction);
  const log = await findLogOf(shelfId, transaction ? { transaction } : {});
  if (shelf === null || log === null) throw notFound('shelf');
  return { id: shelf.id, name: shelf.name, log: log.id, lots: await lotsOfLog(log.id, transaction) };
}

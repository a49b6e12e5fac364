import 'server-only';
import type { Transaction } from '@/db/index';
import { checkpoints, entries, entryParts, stampJobs } from '@/db/models/logs';
import { findEntry } from '@/db/queries/entries';
import { type LogHead, markTimesInjected } from '@/db/queries/logs';
import { WitnessmarkError } from '@/lib/errors';
import { fromHex, toBase64 } from '@/lib/evidence/bytes';
import { checkpointText, signNote } from '@/lib/evidence/checkpoint';
import { CompactTree } from '@/lib/evidence/merkle';
import { type EntryKind, machineKinds, type Reference, shelfKinds } from '@/lib/evidence/format';
import { buildLeaf } from '@/lib/evidence/leaf';
import { isClockInjected, now } from '@/lib/ports/clock';
import { authorities } from '@/lib/ports/time-stamp-authority/authorities';
import { demandNotRolledBack } from '@/lib/services/notice-rollback';
import { signerNamed } from '@/lib/services/log-keys';
import { type Parts, sealableParts } from '@/lib/services/sealable-parts';

/** An installation whose clock is further behind its own last entry does not seal. */
const toleratedClockLagMilliseconds = 5 * 60_000;

/** Every reader of a record reads all of its entries. Long ones take some thirty thousand. */
export const mostCharactersOfAnEntry = 1_000_000;

export interface Sealed {
  log: string;
  seq: number;
  leafHash: string;
  /** UTC, milliseconds. */
  sealedAt: string;
}

export interface NextEntry {
  kind: EntryKind;
  /** Id of the person who seals. */
  by: string;
  idempotencyKey: string;
  refersTo?: Reference | null;
  /**
   * Makes the parts while the log is held; absent ones are left out. May read, with the transaction; must not call
   * `write`, which waits for this very transaction to end.
   */
  parts: (context: { transaction: Transaction; seq: number; sealedAt: string }) => Promise<Parts>;
  /** Further writes that are done together with the entry or not at all. */
  within?: (transaction: Transaction, sealed: Sealed) => Promise<void>;
}

/** Seals the next line of a log inside the caller's transaction. Returns it with the signed checkpoint over it. */
export async function sealNext(
  head: LogHead,
  next: NextEntry,
  transaction: Transaction,
): Promise<{ sealed: Sealed; note: string }> {
  const { log, lastEntry, lastCheckpoint } = head;
  demandKind(log.subject, next.kind);
  if ((lastCheckpoint?.size ?? 0) !== (lastEntry?.seq ?? -1) + 1) {
    throw new WitnessmarkError('internal', 'This record cannot be continued: its last entry has no checkpoint.', {
      log: `log ${log.id}: last entry ${lastEntry?.seq}, last checkpoint ${lastCheckpoint?.size}`,
    });
  }
  await demandNotRolledBack(log.id, lastCheckpoint, transaction);
  const seq = (lastEntry?.seq ?? -1) + 1;
  const sealedAt = sealingTime(lastEntry?.sealedAt);
  const refersTo = next.refersTo ?? null;
  if (refersTo !== null) await demandReference(log.id, refersTo, transaction);

  const parts = sealableParts(await next.parts({ transaction, seq, sealedAt }));
  const leaf = buildLeaf({
    log: log.id,
    seq,
    previous: lastEntry?.leafHash ?? null,
    kind: next.kind,
    sealedAt,
    refersTo,
    parts,
  });
  const characters = leaf.disclosures.reduce((total, { text }) => total + text.length, 0);
  if (characters > mostCharactersOfAnEntry) {
    throw new WitnessmarkError(
      'too-large',
      'This is too long for one entry. Shorten its notes, or seal it as two worksheets.',
    );
  }
  const tree = lastCheckpoint === null ? new CompactTree() : CompactTree.from(lastCheckpoint.tree);
  tree.append(leaf.hash);
  const text = checkpointText({ origin: log.origin, log: log.id, size: tree.size, root: tree.root });
  const note = signNote(text, signerNamed(log.keyName));
  const sealed: Sealed = { log: log.id, seq, leafHash: leaf.hash, sealedAt };

  await entries.insert(
    {
      logId: log.id,
      seq,
      kind: next.kind,
      sealedAt,
      leafHash: leaf.hash,
      previous: lastEntry?.leafHash ?? null,
      refersToSeq: refersTo?.seq ?? null,
      leaf: leaf.text,
      sealedBy: next.by,
      idempotencyKey: next.idempotencyKey,
    },
    { transaction },
  );
  const partRows = leaf.disclosures.map(({ name, text: disclosure }) => ({ logId: log.id, seq, name, disclosure }));
  await entryParts.insertMany(partRows, { transaction });
  const root = toBase64(fromHex(tree.root));
  await checkpoints.insert(
    { logId: log.id, size: tree.size, root, note, tree: tree.serialise(), createdAt: sealedAt },
    { transaction },
  );
  const jobs = authorities().map(({ name }) => ({
    logId: log.id,
    size: tree.size,
    authority: name,
    attempts: 0,
    nextTryAt: sealedAt,
    lastError: null,
    doneAt: null,
  }));
  await stampJobs.insertMany(jobs, { transaction });
  if (isClockInjected() && !log.timesInjected) await markTimesInjected(log.id, transaction);
  await next.within?.(transaction, sealed);
  return { sealed, note };
}

/** The server's clock, but never before the last entry. */
function sealingTime(last: string | undefined): string {
  const time = now().getTime();
  if (last === undefined) return new Date(time).toISOString();
  const lastTime = Date.parse(last);
  if (time < lastTime - toleratedClockLagMilliseconds) {
    throw new WitnessmarkError(
      'clock-behind',
      `Nothing can be sealed: this server’s clock says ${new Date(time).toISOString()}, ` +
        `but the last entry was sealed at ${last}. Set the clock right, then seal again.`,
    );
  }
  return new Date(Math.max(time, lastTime)).toISOString();
}

function demandKind(subject: 'machine' | 'shelf', kind: EntryKind): void {
  const kinds: readonly EntryKind[] = subject === 'machine' ? machineKinds : shelfKinds;
  if (!kinds.includes(kind)) throw new Error(`The log of a ${subject} has no entries of kind ${kind}.`);
}

async function demandReference(log: string, refersTo: Reference, transaction: Transaction): Promise<void> {
  const entry = await findEntry(log, refersTo.seq, { transaction });
  if (entry?.leafHash !== refersTo.leafHash) {
    throw new WitnessmarkError(
      'conflict',
      `This refers to entry ${refersTo.seq}, but the record holds no such entry. Reload the page and try again.`,
    );
  }
}

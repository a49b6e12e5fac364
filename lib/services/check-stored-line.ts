import 'server-only';
import { isDeepStrictEqual } from 'node:util';
import type { DrawRow, EntryRow, LogRow, TokenRow } from '@/db/models/logs';
import { findEntry } from '@/db/queries/entries';
import type { StoredLines } from '@/db/queries/stored-lines';
import { fromBase64 } from '@/lib/evidence/bytes';
import { parseNote } from '@/lib/evidence/checkpoint';
import { openDisclosure } from '@/lib/evidence/disclosure';
import type { Findings } from '@/lib/evidence/findings';
import type { ServiceBody } from '@/lib/evidence/format';
import { sha256Hex } from '@/lib/evidence/hash';
import { readToken } from '@/lib/evidence/token';
import type { WalkedLine } from '@/lib/evidence/verify-log';
import { isAttachments, openParts } from '@/lib/evidence/verify-parts';
import { blobStore } from '@/lib/ports/blob-store';
import { ownAuthorityName } from '@/lib/evidence/own-authority';
import { drawRowsOf } from '@/lib/services/compose-worksheet';
import type { StoredProblems } from '@/lib/services/stored-problems';

interface Line {
  log: LogRow;
  line: WalkedLine;
  rows: StoredLines;
  /** Leaf hashes of this log up to this line. */
  hashes: string[];
  findings: Findings;
  problems: StoredProblems;
}

/** Checks what is stored beside a line that was walked: its columns, parts, seal, time stamps, draws and files. */
export async function checkStoredLine(options: Line): Promise<void> {
  const { log, line, rows, problems } = options;
  const place = { log: log.id, seq: line.seq };
  const row = rows.entries.find(({ seq }) => seq === line.seq);
  if (row === undefined) {
    problems.add(place, `Entry ${line.seq} is not there.`, `no row ${log.id}/${line.seq} in entries`);
    return;
  }
  checkColumns(options, row);
  checkSeal(options, row);
  for (const token of rows.tokens.filter(({ size }) => size === line.seq + 1)) checkToken(options, token);
  const opened = checkParts(options);
  await checkDraws(options, opened.get('body'));
  await checkFilesOf(options, opened.get('attachments'));
}

function checkColumns({ log, line, hashes, problems }: Line, row: EntryRow): void {
  const place = { log: log.id, seq: line.seq };
  const { leaf, hash, seq } = line;
  const target = leaf?.refersTo ?? null;
  if (target !== null && hashes[target.seq] !== target.leafHash) {
    const sentence = `Entry ${seq} refers to entry ${target.seq}, but not to the one that stands there.`;
    problems.add(place, sentence, `refersTo ${target.leafHash} at seq ${target.seq}`);
  }
  const said = [row.kind, row.sealedAt, row.leafHash, row.previous, row.refersToSeq];
  const sealed = [leaf?.kind, leaf?.sealedAt, hash, leaf?.previous, target?.seq ?? null];
  const isOpening = seq === 0 && row.idempotencyKey !== `opening/${log.subjectId}`;
  if (leaf !== null && isDeepStrictEqual(said, sealed) && !isOpening) return;
  const sentence = `The columns beside entry ${seq} do not say what its line says.`;
  problems.add(place, sentence, `${JSON.stringify(said)}, sealed ${JSON.stringify(sealed)}, ${row.idempotencyKey}`);
}

function checkSeal({ log, line, rows, problems }: Line, row: EntryRow): void {
  const place = { log: log.id, seq: line.seq };
  const checkpoint = rows.checkpoints.find(({ size }) => size === line.seq + 1);
  if (checkpoint === undefined) {
    problems.add(place, `Entry ${line.seq} has no seal.`, `no checkpoint of size ${line.seq + 1}`);
    return;
  }
  const { keyName } = parseNote(checkpoint.note);
  if (checkpoint.createdAt === row.sealedAt && keyName === log.keyName) return;
  const sentence = `The columns beside the seal of entry ${line.seq} do not say what it says.`;
  problems.add(place, sentence, `${checkpoint.createdAt}, sealed ${row.sealedAt}; key ${keyName}, log ${log.keyName}`);
}

/** What its imprint covers, the walk has checked; here is what the installation wrote beside it. */
function checkToken({ log, line, rows, problems }: Line, row: TokenRow): void {
  const place = { log: log.id, seq: line.seq };
  const der = fromBase64(row.token);
  const hash = sha256Hex(der);
  const said = [row.sha256, row.genTime, row.isOwnAuthority];
  const found = [hash, readToken(der).genTime, row.authority === ownAuthorityName];
  const job = rows.stampJobs.find(({ size, authority }) => size === row.size && authority === row.authority);
  if (isDeepStrictEqual(said, found) && job?.doneAt === row.createdAt) return;
  const sentence = `A time stamp of entry ${line.seq} is not the one that was stored.`;
  problems.add(place, sentence, `${JSON.stringify(said)}, found ${JSON.stringify(found)}, of ${row.authority}`);
}

/** A part that the line names must be there, unless its erasure was recorded. */
function checkParts({ log, line, rows, findings, problems }: Line): Map<string, unknown> {
  const stored = rows.parts.filter(({ seq }) => seq === line.seq);
  const parts = stored.map(({ disclosure }) => String(disclosure));
  const { opened } = openParts({ leaf: '', parts, seal: { checkpoint: '', tokens: [] } }, line, log.id, findings);
  for (const { name, disclosure } of stored) {
    const place = { log: log.id, seq: line.seq, part: String(name) };
    if (nameIn(disclosure) === name) continue;
    problems.add(
      place,
      `A part of entry ${line.seq} is stored under another name.`,
      `${nameIn(disclosure)} as ${name}`,
    );
  }
  const erased = new Set(rows.erasures.filter(({ seq }) => seq === line.seq).map(({ name }) => name));
  for (const { name } of line.leaf?.parts ?? []) {
    if (erased.has(name) || stored.some((part) => part.name === name)) continue;
    const place = { log: log.id, seq: line.seq, part: name };
    problems.add(place, `The part “${name}” of entry ${line.seq} is not there.`, 'no row, and no erasure was recorded');
  }
  return new Map<string, unknown>(opened);
}

function nameIn(disclosure: string): string | null {
  try {
    return openDisclosure(disclosure).name;
  } catch {
    return null;
  }
}

/** Balances of lots are counted from the rows: they must be what the sealed service says. */
async function checkDraws({ log, line, rows, problems }: Line, body: unknown): Promise<void> {
  const place = { log: log.id, seq: line.seq, part: 'body' };
  const stored = rows.draws.filter(({ entrySeq }) => entrySeq === line.seq);
  const isService = line.leaf?.kind === 'service';
  // An erased body says nothing any more; its draws stay, or a lot would fill up again.
  if (isService && body === undefined) return;
  const sealed: DrawRow[] = isService ? drawRowsOf(body as ServiceBody, { log: log.id, seq: line.seq }) : [];
  if (!isDeepStrictEqual(stored.map(plain), sealed.map(plain))) {
    const sentence = `What was taken from lots is not stored as entry ${line.seq} says it.`;
    problems.add(place, sentence, `${JSON.stringify(stored)}, sealed ${JSON.stringify(sealed)}`);
  }
  for (const draw of isService ? drawsOf(body as ServiceBody) : []) {
    const bought = await findEntry(draw.log, draw.seq);
    if (bought?.kind === 'purchase' && bought.leafHash === draw.leafHash) continue;
    const sentence = `Entry ${line.seq} takes something from a purchase that is not there.`;
    problems.add(place, sentence, `${draw.log}/${draw.seq} is not ${draw.leafHash}`);
  }
}

const plain = (row: DrawRow) => ({ ...row });
const drawsOf = (body: ServiceBody) =>
  body.tasks.flatMap((task) =>
    [...task.fills, ...task.parts].flatMap((use) => use.draws.map(({ purchase }) => purchase)),
  );

async function checkFilesOf({ log, line, problems }: Line, attachments: unknown): Promise<void> {
  if (!isAttachments(attachments)) return;
  const files = attachments.flatMap((file) => (file.copy === undefined ? [file] : [file, file.copy]));
  for (const { sha256, bytes } of files) {
    const found = (await blobStore.has(sha256)) ? await blobStore.size(sha256) : null;
    if (found === bytes) continue;
    const sentence = `A file of entry ${line.seq} is ${found === null ? 'not there' : 'of another length'}.`;
    problems.add(
      { log: log.id, seq: line.seq, part: 'attachments' },
      sentence,
      `${sha256}: ${found} of ${bytes} bytes`,
    );
  }
}

import { expect, it } from 'vitest';
import { fromUtf8, utf8 } from '@/lib/evidence/bytes';
import { checkpointText, parseCheckpoint, parseNote, signNote, verifyNote } from '@/lib/evidence/checkpoint';
import { readContainer } from '@/lib/evidence/container';
import { stoodIn } from '@/lib/evidence/older-file';
import { verifyBundle } from '@/lib/evidence/verify';
import {
  attacker,
  author,
  buildRecord,
  installation,
  keyOf,
  LogBuilder,
  machineLog,
  origin,
  shelfLog,
  signedText,
  signerOf,
  unsignedBundle,
} from './build-record';

const key = keyOf(installation);
const sealedAt = '2026-06-01T00:00:00.000Z';
/** The machine's log alone, with as many readings after the opening as are named. */
const logOf = (...readings: string[]): LogBuilder => {
  const log = new LogBuilder(machineLog, 'machine');
  log.append({ kind: 'opening', sealedAt, parts: { author, body: {} } });
  for (const value of readings) log.append({ kind: 'reading', sealedAt, parts: { author, body: { odometer: value } } });
  return log;
};
const textOf = (
  log: LogBuilder,
  entries = log.built.length,
  madeAt = '2026-07-01T00:00:00.000Z',
  signer = installation,
) => {
  const whole = log.toLog();
  const cut = { ...whole, entries: whole.entries.slice(0, entries), checkpoint: log.seals[entries - 1] ?? '' };
  return signedText(unsignedBundle(buildRecord(), { logs: [cut], files: [], madeAt }), signer);
};
const log = logOf('100', '200', '300');
const text = textOf(log);
const earlier = '2026-06-15T00:00:00.000Z';

it.each([1, 3, 4])('a record agrees with its own beginning of %i entries', (entries) => {
  const finding = verifyBundle({ bundleText: text, key, against: textOf(log, entries, earlier) });
  expect(finding).toMatchObject({ outcome: 'unchanged', against: { result: 'consistent', notes: [] } });
});

it('a record agrees with a signed checkpoint kept from a mail', () => {
  expect(verifyBundle({ bundleText: text, key, against: log.seals[1] ?? '' })).toMatchObject({
    outcome: 'unchanged',
    against: { result: 'consistent' },
  });
});

it('a checkpoint saved out of a mail counts whatever line ends and space the mail program put around it', () => {
  const saved = `\r\n${(log.seals[1] ?? '').replaceAll('\n', '\r\n')}\r\n\r\n`;
  expect(verifyBundle({ bundleText: text, key, against: saved })).toMatchObject({
    outcome: 'unchanged',
    against: { result: 'consistent' },
  });
});

it('a record with another past is forked: the first differing entry is named and both notes are kept', () => {
  const past = logOf('100');
  const newer = past.fork();
  newer.append({ kind: 'reading', sealedAt, parts: { author, body: { odometer: '200' } } });
  const older = past.fork();
  older.append({ kind: 'reading', sealedAt, parts: { author, body: { odometer: '150' } } });
  const finding = verifyBundle({ bundleText: textOf(newer), key, against: textOf(older, 3, earlier) });
  expect(finding).toMatchObject({
    outcome: 'altered',
    alterations: [{ code: 'forked', log: machineLog, seq: 2 }],
    against: { result: 'forked', notes: [{ log: machineLog, older: older.seals[2], newer: newer.seals[2] }] },
  });
  expect(finding.entries[2]?.problems).toEqual(['forked']);
  expect(verifyBundle({ bundleText: textOf(newer), key, against: older.seals[2] ?? '' })).toMatchObject({
    alterations: [{ code: 'forked', log: machineLog }],
  });
});

it('a newer file that ends earlier than the older one has lost entries', () => {
  const finding = verifyBundle({ bundleText: textOf(log, 2), key, against: textOf(log, 4, earlier) });
  expect(finding).toMatchObject({ outcome: 'altered', alterations: [{ code: 'entries-missing' }] });
});

it('two files given the wrong way round are not altered', () => {
  const finding = verifyBundle({ bundleText: textOf(log, 2, earlier), key, against: text });
  expect(finding).toMatchObject({ outcome: 'unchanged', against: { result: 'shorter' } });
});

it.each([
  ['that cannot be read', 'an older file'],
  ['that holds other entries than it was signed for', textOf(log).replaceAll('reading', 'service')],
  ['that somebody else signed', signNote(parseNote(log.seals[1] ?? '').text, attacker)],
])('an older file %s says nothing against a record', (_, against) => {
  expect(verifyBundle({ bundleText: text, key, against })).toMatchObject({
    outcome: 'unchanged',
    against: { result: 'not-comparable' },
  });
});

it('an older file about another record is remarked on', () => {
  const other = new LogBuilder('6f1c2a34-0000-4000-8000-00000000000f', 'machine');
  other.append({ kind: 'opening', sealedAt, parts: { author, body: {} } });
  const finding = verifyBundle({ bundleText: text, key, against: other.seals[0] ?? '' });
  expect(finding).toMatchObject({ outcome: 'unchanged', against: { result: 'not-comparable' } });
  expect(finding.remarks.map(({ code }) => code)).toContain('other-log');
});

const later = signerOf(7);
/** The record after its key was rotated: older seals stand under the older key, the file is signed with the newer. */
const rotated = (verifierKeys: string[]) => {
  const whole = log.toLog();
  const checkpoint = signNote(parseNote(whole.checkpoint).text, later);
  return signedText(
    unsignedBundle(buildRecord(), { logs: [{ ...whole, checkpoint }], files: [], verifierKeys }),
    later,
  );
};

it('an older file signed with a key that was rotated since is compared, because the newer file lists that key', () => {
  const bundleText = rotated([keyOf(later), key]);
  for (const against of [textOf(log, 3, earlier), log.seals[1] ?? '']) {
    expect(verifyBundle({ bundleText, key: keyOf(later), against })).toMatchObject({
      outcome: 'unchanged',
      against: { result: 'consistent' },
    });
  }
});

it('an older file whose key the newer one does not list says so, names the key, and doubts both', () => {
  const forged = new LogBuilder(machineLog, 'machine', attacker);
  forged.append({ kind: 'opening', sealedAt, parts: { author, body: { model: 'Wren 300' } } });
  const bundleText = signedText(
    unsignedBundle(buildRecord(), { logs: [forged.toLog()], files: [], verifierKeys: [keyOf(attacker)] }),
    attacker,
  );
  const { against } = verifyBundle({ bundleText, against: textOf(log, 3, earlier) });
  expect(against).toMatchObject({ result: 'not-comparable', notes: [] });
  expect(against?.sentence).toContain('a key that this file does not list (fingerprint ');
  expect(against?.sentence).toContain('differ from entry 0 on');
  expect(against?.sentence).toContain('it may be this one: ask for the key');
});

it('an attacker’s older note makes no fork, also if the attacker has the key’s name', () => {
  const lie = checkpointText({ origin, log: machineLog, size: 2, root: 'ab'.repeat(32) });
  expect(verifyBundle({ bundleText: text, key, against: signNote(lie, attacker) })).toMatchObject({
    outcome: 'unchanged',
    alterations: [],
    against: { result: 'not-comparable', notes: [] },
  });
});

it('an older checkpoint that goes further than the file is not said to agree with it', () => {
  const { against, outcome } = verifyBundle({ bundleText: textOf(log, 2), key, against: log.seals[3] ?? '' });
  expect(against).toMatchObject({ result: 'shorter' });
  expect(against?.sentence).toContain('cannot tell whether they agree');
  expect(outcome).toBe('unchanged');
});

it('an older file that goes further and tells another past is forked, shown by two checkpoints of the same size', () => {
  const past = logOf('100');
  const [newer, older] = [past.fork(), past.fork()];
  newer.append({ kind: 'reading', sealedAt, parts: { author, body: { odometer: '200' } } });
  for (const value of ['150', '160', '170'])
    older.append({ kind: 'reading', sealedAt, parts: { author, body: { value } } });
  const { against, alterations } = verifyBundle({ bundleText: textOf(newer), key, against: textOf(older, 5, earlier) });
  expect(alterations).toMatchObject([{ code: 'forked', seq: 2 }]);
  const [pair] = against?.notes ?? [];
  const sizes = [pair?.older, pair?.newer].map((note) => parseCheckpoint(parseNote(note ?? '').text).size);
  expect(sizes).toEqual([3, 3]);
  expect([pair?.older, pair?.newer].every((note) => verifyNote(note ?? '', key))).toBe(true);
});

it('a rewritten log signed again with the same key is found by last year’s checkpoint, and names no entry by guess', () => {
  const [newer, older] = [logOf('100', '250', '300'), logOf('100', '200')];
  const { alterations, against } = verifyBundle({ bundleText: textOf(newer), key, against: older.seals[2] ?? '' });
  expect(alterations).toMatchObject([{ code: 'forked', log: machineLog }]);
  expect(alterations[0]?.seq).toBeUndefined();
  expect(alterations[0]?.sentence).toContain('lies in entries 0 to 2');
  expect(against?.notes).toEqual([{ log: machineLog, older: older.seals[2], newer: newer.seals[2] }]);
});

it('a date of the older file that is not signed makes nobody lose entries', () => {
  const moved = textOf(log, 4, '2026-08-01T00:00:00.000Z').replace('2026-08-01', '2026-06-01');
  const { outcome, against } = verifyBundle({ bundleText: textOf(log, 2), key, against: moved });
  expect({ outcome, result: against?.result }).toEqual({ outcome: 'unchanged', result: 'shorter' });
});

it('a newer file whose date was moved before the older one’s is altered by that alone', () => {
  const moved = textOf(log, 2).replace('"madeAt":"2026-07-01', '"madeAt":"2026-06-01');
  expect(verifyBundle({ bundleText: moved, key, against: textOf(log, 4, earlier) })).toMatchObject({
    outcome: 'altered',
    alterations: [{ code: 'bundle-changed' }],
  });
});

it('the shelf’s past is compared as well as the machine’s', () => {
  const record = buildRecord();
  const rewritten = buildRecord();
  const olderText = signedText(unsignedBundle(record, { madeAt: earlier }));
  expect(verifyBundle({ bundleText: signedText(unsignedBundle(record)), key, against: olderText })).toMatchObject({
    outcome: 'unchanged',
    against: { result: 'consistent' },
  });
  // Salts differ from one record to the next, so every line of both logs does.
  const { alterations } = verifyBundle({ bundleText: signedText(unsignedBundle(rewritten)), key, against: olderText });
  expect(alterations.map(({ code, log: id }) => [code, id])).toEqual([
    ['forked', machineLog],
    ['forked', shelfLog],
  ]);
});

it('another machine’s file that shares only the shelf is not called a beginning of this one', () => {
  const record = buildRecord();
  const other = new LogBuilder('6f1c2a34-0000-4000-8000-00000000000f', 'machine');
  other.append({ kind: 'opening', sealedAt, parts: { author, body: {} } });
  const against = signedText(
    unsignedBundle(record, { logs: [other.toLog(), record.shelf.toLog()], files: [], madeAt: earlier }),
  );
  const finding = verifyBundle({ bundleText: signedText(unsignedBundle(record)), key, against });
  expect(finding.against).toMatchObject({ result: 'not-comparable' });
  expect(finding.against?.sentence).toContain('about another machine');
});

it('a long run of blanks in an older file costs no more than as much text', () => {
  const record = buildRecord();
  // Tried anew from each of its blanks, this run alone would take longer than the test may.
  const { against } = verifyBundle({
    bundleText: signedText(unsignedBundle(record)),
    key,
    against: `a${' '.repeat(200_000)}b`,
  });
  expect(against?.result).toBe('not-comparable');
});

it('checkpoints are found within the text of a mail, one for each log', () => {
  const record = buildRecord();
  const seals = [record.machine.seals[1], record.shelf.seals[0]].join('\n');
  const mail = `Your record stands at 2 entries.\n\n${seals}\nKeep this mail.\n`.replaceAll('\n', '\r\n');
  const { against } = verifyBundle({ bundleText: signedText(unsignedBundle(record)), key, against: mail });
  expect(against?.result).toBe('consistent');
  expect(against?.sentence).toContain('The machine’s log: 2 entries stand unchanged, 2 came after.');
  expect(against?.sentence).toContain('The shelf’s log: 1 entry stands unchanged, 1 came after.');
});

it('a bare record and a saved checkpoint come out of their files as they are', async () => {
  const note = log.seals[1] ?? '';
  for (const file of [text, note]) expect((await readContainer(utf8(file))).bundleText).toBe(fromUtf8(utf8(file)));
});

it.each<[string, string, number, boolean | null]>([
  ['in an older file', textOf(log, 2, earlier), 1, true],
  ['not in an older file that ends before it', textOf(log, 2, earlier), 2, false],
  ['under an older checkpoint', log.seals[1] ?? '', 1, true],
  ['not under an older checkpoint of fewer entries', log.seals[1] ?? '', 2, false],
  ['nowhere, if the checkpoint is of another past', logOf('1', '2').seals[2] ?? '', 1, null],
  ['nowhere, if the older file cannot be read', 'a letter', 1, null],
  ['nowhere, if the record has no such entry', textOf(log, 2, earlier), 9, null],
])('an entry stood %s', (_, older, seq, expected) => {
  expect(stoodIn(older, text, { log: machineLog, seq })).toBe(expected);
});

it('an entry that the older file has otherwise did not stand in it', () => {
  expect(stoodIn(textOf(logOf('999'), 2, earlier), text, { log: machineLog, seq: 1 })).toBe(false);
});

import { expect, it } from 'vitest';
import { signNote, parseNote } from '@/lib/evidence/checkpoint';
import { verifyBundle } from '@/lib/evidence/verify';
import {
  attacker,
  author,
  buildRecord,
  installation,
  keyOf,
  LogBuilder,
  machineLog,
  signedText,
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

import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { parseNote, signNote } from '@/lib/evidence/checkpoint';
import { verifyBundle } from '@/lib/evidence/verify';
import {
  buildRecord, givenFiles, installation, keyOf, LogBuilder, machineLog, author, signedText, unsignedBundle, signerOf,
} from './build-record'; // prettier-ignore

const key = keyOf(installation);

describe('a record that nobody changed', () => {
  const text = signedText(unsignedBundle(buildRecord()));

  it('is unchanged, with every line and part counted', () => {
    const finding = verifyBundle({ bundleText: text, files: givenFiles, key });
    expect(finding.alterations).toEqual([]);
    expect(finding).toMatchObject({
      outcome: 'unchanged',
      counts: { entries: 6, entriesOpened: 6, partsOpened: 15, partsWithheld: 0 },
      key: { name: 'records.garage.example', source: 'reader' },
      bundle: { number: 'WM-0001' },
      notChecked: [],
    });
    expect(finding.logs.map((log) => [log.subject, log.checkpoint?.size])).toEqual([['machine', 4], ['shelf', 2]]); // prettier-ignore
    expect(finding.entries[2]).toMatchObject({
      log: machineLog, seq: 2, kind: 'service', withheldParts: [], problems: [], stampedBy: [], earliestStamp: null,
      claimed: { finishedAt: { date: '2026-04-18' } },
    }); // prettier-ignore
  });

  it('says first of all that the key came from the file, when nobody gave one', () => {
    const finding = verifyBundle({ bundleText: text });
    expect(finding.outcome).toBe('unchanged');
    expect(finding.remarks[0]).toMatchObject({ code: 'key-from-file' });
    expect(finding.key?.source).toBe('file');
    expect(finding.notChecked).toHaveLength(1);
  });

  it('says that its times are the word of the installation, when nothing is time-stamped', () => {
    const remarks = verifyBundle({ bundleText: text, key }).remarks.filter(
      (remark) => remark.code === 'not-time-stamped',
    );
    expect(remarks.map((remark) => remark.count)).toEqual([4, 2]);
  });

  it('says that pages were not checked, when it came out of a packet', () => {
    const finding = verifyBundle({ bundleText: text, key, pages: { state: 'none' } });
    expect(finding).toMatchObject({ outcome: 'unchanged', pages: 'not-checked' });
    expect(finding.remarks.map((remark) => remark.code)).toContain('pages-not-checked');
  });
});

it('counts what is withheld, by name, and is still unchanged', () => {
  const record = buildRecord();
  const logs = [record.machine.toLog((seq) => seq !== 2), record.shelf.toLog((_, part) => part !== 'prices')];
  const finding = verifyBundle({ bundleText: signedText(unsignedBundle(record, { logs, files: [] })), key });
  expect(finding.alterations).toEqual([]);
  expect(finding.counts).toEqual({ entries: 6, entriesOpened: 5, partsOpened: 11, partsWithheld: 4 });
  expect(finding.entries[2]?.withheldParts).toEqual(['attachments', 'author', 'body']);
  expect(finding.remarks.find((remark) => remark.code === 'withheld')).toMatchObject({ count: 4 });
});

it('accepts older seals under an older listed key, once the log and the file are signed with the newest', () => {
  const newest = signerOf(3);
  const record = buildRecord();
  const logs = [record.machine.toLog(), record.shelf.toLog()].map((log) => {
    return { ...log, checkpoint: signNote(parseNote(log.checkpoint).text, newest) };
  });
  const unsigned = unsignedBundle(record, { logs, verifierKeys: [keyOf(newest), key] });
  expect(verifyBundle({ bundleText: signedText(unsigned, newest), key: keyOf(newest) }).alterations).toEqual([]);
  const unlisted = signedText({ ...unsigned, verifierKeys: [keyOf(newest)] }, newest);
  const codes = verifyBundle({ bundleText: unlisted }).alterations.map(({ code }) => code);
  expect(codes).toEqual(Array.from({ length: 6 }, () => 'unknown-key'));
});

describe('what is no record', () => {
  it.each([
    ['nothing', ''],
    ['text', 'a record'],
    ['half a record', signedText(unsignedBundle(buildRecord())).slice(0, 200)],
    ['a list', '[]'],
    ['another format', '{"format":"witnessmark/bundle/2"}'],
  ])('is unreadable: %s', (_, bundleText) => {
    expect(verifyBundle({ bundleText })).toMatchObject({ outcome: 'unreadable', entries: [], bundle: null });
  });

  it.each([
    ['nothing but its format', '{"format":"witnessmark/bundle/1"}'],
    ['a line that is a number', signedText(unsignedBundle(buildRecord())).replace(/"leaf":"[^]*?[^\\]"/, '"leaf":1')],
  ])('but a record with %s is altered', (_, bundleText) => {
    expect(verifyBundle({ bundleText })).toMatchObject({ outcome: 'altered' });
  });
});

describe('hostile input', () => {
  it('never makes it throw', () => {
    fc.assert(
      fc.property(fc.string({ maxLength: 200 }), fc.string({ maxLength: 50 }), (bundleText, other) => {
        expect(verifyBundle({ bundleText, key: other, against: other }).outcome).toBe('unreadable');
      }),
    );
  });

  it('inside a bundle is altered, whatever stands where', () => {
    const good: unknown = JSON.parse(signedText(unsignedBundle(buildRecord())));
    const paths = pathsOf(good);
    fc.assert(
      fc.property(fc.constantFrom(...paths), fc.jsonValue({ maxDepth: 3 }), (path, junk) => {
        const bundleText = JSON.stringify(replaced(good, path, junk));
        fc.pre(bundleText !== JSON.stringify(good));
        const { outcome } = verifyBundle({ bundleText, key });
        expect(outcome).toBe(path.join('.') === 'format' ? 'unreadable' : 'altered');
      }),
      { numRuns: 300 },
    );
  });

  it('nested a hundred thousand levels deep does not exhaust it', () => {
    const deep = '['.repeat(100_000) + ']'.repeat(100_000);
    expect(verifyBundle({ bundleText: deep }).outcome).toBe('unreadable');
    expect(verifyBundle({ bundleText: `{"format":"witnessmark/bundle/1","logs":${deep}}` }).outcome).toBe('altered');
  });
});

it('a single changed byte of a small record is always noticed', () => {
  const machine = new LogBuilder(machineLog, 'machine');
  machine.append({
    kind: 'opening',
    sealedAt: '2026-01-01T08:01:00.000Z',
    parts: { author, body: { make: 'Corvane' } },
  });
  const unsigned = unsignedBundle(buildRecord(), { logs: [machine.toLog()], files: [] });
  const bytes = Buffer.from(signedText(unsigned));
  expect(verifyBundle({ bundleText: bytes.toString(), key }).outcome).toBe('unchanged');
  for (let index = 0; index < bytes.length; index += 1) {
    // One bit here, the case of a letter there: every byte of the file, in turn.
    const changed = Buffer.from(bytes);
    changed[index] = (changed[index] ?? 0) ^ (index % 2 === 0 ? 0x01 : 0x20);
    // Without a key given, even the listed key itself must be held by what it signed.
    const finding = verifyBundle({ bundleText: changed.toString('utf8') });
    expect(finding.outcome, `byte ${index} of ${bytes.length}`).not.toBe('unchanged');
  }
}, 120_000);

type Path = (string | number)[];
function pathsOf(value: unknown, path: Path = []): Path[] {
  if (typeof value !== 'object' || value === null) return [path];
  return [
    ...(path.length > 0 ? [path] : []),
    ...Object.entries(value).flatMap(([name, item]) => pathsOf(item, [...path, name])),
  ];
}
function replaced(value: unknown, [first, ...rest]: Path, junk: unknown): unknown {
  if (first === undefined) return junk;
  if (Array.isArray(value))
    return value.map((item: unknown, index) => (String(index) === String(first) ? replaced(item, rest, junk) : item));
  const object = value as Record<string, unknown>;
  return { ...object, [first]: replaced(object[String(first)], rest, junk) };
}

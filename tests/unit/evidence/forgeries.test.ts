import { expect, it } from 'vitest';
import { bundleText, maxBundleKeys, maxBundleLogs, signBundle } from '@/lib/evidence/bundle';
import { checkpointText, parseNote, signNote } from '@/lib/evidence/checkpoint';
import type { AlterationCode } from '@/lib/evidence/codes';
import { makeDisclosure, openDisclosure } from '@/lib/evidence/disclosure';
import type { Bundle, BundleLog } from '@/lib/evidence/format';
import { leafHash } from '@/lib/evidence/leaf';
import { rootOf } from '@/lib/evidence/merkle';
import { readContainer } from '@/lib/evidence/container';
import { verifyBundle } from '@/lib/evidence/verify';
import { forgeries as listed } from './build-forgeries';
import {
  attacker, author, buildRecord, givenFiles, installation, keyOf, listedOil, listedReceipt, LogBuilder, machineLog,
  oilBytes, origin, receiptBytes, shelfLog, signedText, unsignedBundle,
} from './build-record'; // prettier-ignore

const key = keyOf(installation);
const record = buildRecord();
const logs = (): [BundleLog, BundleLog] => [record.machine.toLog(), record.shelf.toLog()];
/** What the installation itself would sign, had it been made to. */
const resigned = (change: Partial<Bundle>) => signedText(unsignedBundle(record, change));
const good = () => signBundle(unsignedBundle(record), installation);
const at = <T>(list: T[], index: number): T => {
  const item = list[index];
  if (item === undefined) throw new Error(`no item ${index}`);
  return item;
};
const codesOf = (request: Parameters<typeof verifyBundle>[0]): AlterationCode[] => [
  ...new Set(verifyBundle({ key, ...request }).alterations.map(({ code }) => code)),
];
/** A record whose machine log has one more line than usual. */
const withLine = (line: Parameters<LogBuilder['append']>[0]): string => {
  const longer = buildRecord();
  longer.machine.append(line);
  return signedText(unsignedBundle(longer));
};

// Each forger is given as much as can be: where the bundle's signature is not the point, it is a good one.
const forgeries: [string, () => string, AlterationCode[]][] = [
  [
    'leaves out the strike at the end',
    () => {
      const [machine, shelf] = logs();
      return resigned({ logs: [{ ...machine, entries: machine.entries.slice(0, 3) }, shelf] });
    },
    ['entries-missing'],
  ],
  [
    'drops an entry in the middle',
    () => {
      const [machine, shelf] = logs();
      return resigned({ logs: [{ ...machine, entries: machine.entries.filter((_, seq) => seq !== 1) }, shelf] });
    },
    ['entries-missing', 'reference-broken'],
  ],
  ['leaves out the whole shelf', () => resigned({ logs: [logs()[0]], files: [] }), ['reference-broken']],
  [
    'opens a part twice',
    () => {
      const [machine, shelf] = logs();
      const parts = at(machine.entries, 2).parts;
      parts.push(at(parts, 0));
      return resigned({ logs: [machine, shelf] });
    },
    ['part-mismatch'],
  ],
  [
    'opens a part under another name',
    () => {
      const [machine, shelf] = logs();
      const entry = at(machine.entries, 2);
      const body = openDisclosure(at(entry.parts, 2));
      entry.parts[2] = makeDisclosure('notes', body.value, body.salt).disclosure;
      return resigned({ logs: [machine, shelf] });
    },
    ['part-mismatch'],
  ],
  [
    'opens the part of another entry',
    () => {
      const [machine, shelf] = logs();
      at(machine.entries, 2).parts[2] = at(at(machine.entries, 3).parts, 1);
      return resigned({ logs: [machine, shelf] });
    },
    ['part-mismatch'],
  ],
  [
    'rewrites a figure in an opened part',
    () => {
      const [machine, shelf] = logs();
      const entry = at(machine.entries, 2);
      const body = openDisclosure(at(entry.parts, 2));
      const better = { ...(body.value as object), odometer: { value: '9034', unit: '[mi_i]', instrument: 0 } };
      entry.parts[2] = makeDisclosure('body', better, body.salt).disclosure;
      return resigned({ logs: [machine, shelf] });
    },
    ['part-mismatch'],
  ],
  [
    'changes a line',
    () => {
      const [machine, shelf] = logs();
      const entry = at(machine.entries, 2);
      entry.leaf = entry.leaf.replace('2026-04-18T23:32', '2026-04-08T23:32');
      return resigned({ logs: [machine, shelf] });
    },
    ['leaf-changed', 'root-mismatch', 'chain-broken', 'reference-broken'],
  ],
  [
    'writes a line down again with a blank in it',
    () => {
      const [machine, shelf] = logs();
      const entry = at(machine.entries, 2);
      entry.leaf = entry.leaf.replace('{', '{ ');
      return resigned({ logs: [machine, shelf] });
    },
    ['not-canonical', 'leaf-changed', 'root-mismatch', 'chain-broken', 'reference-broken', 'file-unbound'],
  ],
  ['writes the whole file down again with blanks in it', () => JSON.stringify(good(), null, 1), ['not-canonical']],
  ['adds a member to the file', () => bundleText({ ...good(), note: '' } as Bundle), ['bundle-changed']],
  ['says another purpose', () => bundleText({ ...good(), purpose: 'Sale' }), ['bundle-changed']],
  [
    'says another purpose, and hashes it too',
    () => {
      const changed = { ...good(), purpose: 'Sale' };
      const statement = parseNote(signBundle(changed, attacker).signature).text;
      const signature = good().signature.replace(parseNote(good().signature).text, statement);
      return bundleText({ ...changed, signature });
    },
    ['bad-signature'],
  ],
  [
    'lists an attacker’s key second and signs with it',
    () => signedText(unsignedBundle(record, { verifierKeys: [key, keyOf(attacker)] }), attacker),
    ['unknown-key'],
  ],
  [
    'lists an attacker’s key second and rebuilds the log with it',
    () => {
      const rebuilt = new LogBuilder(machineLog, 'machine', attacker);
      rebuilt.append({ kind: 'opening', sealedAt: '2026-01-01T08:01:00.000Z', parts: { author, body: {} } });
      const change = { verifierKeys: [key, keyOf(attacker)], logs: [rebuilt.toLog()], files: [] };
      return signedText(unsignedBundle(record, change), attacker);
    },
    ['unknown-key'],
  ],
  ['lists a key that is none', () => resigned({ verifierKeys: [key, 'a+b+c'] }), ['bundle-changed']],
  [
    'puts another root under a seal',
    () => {
      const [machine, shelf] = logs();
      const root = rootOf([leafHash('another past')]);
      at(machine.entries, 0).seal.checkpoint = signNote(
        checkpointText({ origin, log: machineLog, size: 1, root }),
        installation,
      );
      return resigned({ logs: [machine, shelf] });
    },
    ['root-mismatch'],
  ],
  [
    'puts a seal under another entry',
    () => {
      const [machine, shelf] = logs();
      at(machine.entries, 0).seal = at(machine.entries, 1).seal;
      return resigned({ logs: [machine, shelf] });
    },
    ['root-mismatch'],
  ],
  [
    'puts the seal of another log under an entry',
    () => {
      const [machine, shelf] = logs();
      at(machine.entries, 0).seal = at(shelf.entries, 0).seal;
      return resigned({ logs: [machine, shelf] });
    },
    ['root-mismatch'],
  ],
  [
    'changes a signed root but not its signature',
    () => {
      const [machine, shelf] = logs();
      const { checkpoint } = at(machine.entries, 0).seal;
      at(machine.entries, 0).seal.checkpoint = checkpoint.replace('\n1\n', '\n2\n');
      return resigned({ logs: [machine, shelf] });
    },
    ['bad-signature', 'root-mismatch'],
  ],
  [
    'writes a signature that is none',
    () => {
      const [machine, shelf] = logs();
      at(machine.entries, 0).seal.checkpoint = 'signed, the rider';
      return resigned({ logs: [machine, shelf] });
    },
    ['bad-signature'],
  ],
  [
    'gives one log the lines of another',
    () => {
      const [machine, shelf] = logs();
      return resigned({
        logs: [
          { ...machine, entries: shelf.entries },
          { ...shelf, entries: machine.entries },
        ],
        files: [],
      });
    },
    ['leaf-changed', 'chain-broken', 'root-mismatch', 'entries-missing', 'reference-broken'],
  ],
  [
    'exchanges two entries',
    () => {
      const [machine, shelf] = logs();
      const [first, second, third, fourth] = machine.entries as [never, never, never, never];
      return resigned({ logs: [{ ...machine, entries: [first, third, second, fourth] }, shelf] });
    },
    ['entries-missing', 'root-mismatch', 'time-order', 'chain-broken', 'reference-broken'],
  ],
  [
    'seals a line before the line that stands before it',
    () =>
      withLine({
        kind: 'reading',
        sealedAt: '2026-04-19T05:59:59.999Z',
        parts: { author, body: { on: '2026-04-19' } },
      }),
    ['time-order'],
  ],
  [
    'strikes nothing in particular',
    () => withLine({ kind: 'strike', sealedAt: '2026-04-20T00:00:00.000Z', parts: { author, body: { reason: '' } } }),
    ['reference-broken'],
  ],
  [
    'countersigns an entry that never was',
    () => {
      const refersTo = { seq: 2, leafHash: leafHash('another entry') };
      return withLine({
        kind: 'countersignature',
        sealedAt: '2026-04-20T00:00:00.000Z',
        refersTo,
        parts: { author, body: {} },
      });
    },
    ['reference-broken'],
  ],
  [
    'judges a service by terms that are none',
    () => withLine({ kind: 'service', sealedAt: '2026-04-20T00:00:00.000Z', parts: { author, body: { termsSeq: 0 } } }),
    ['reference-broken'],
  ],
  [
    'draws from a purchase that never was',
    () =>
      signedText(unsignedBundle(buildRecord(() => ({ purchase: { log: shelfLog, seq: 9, leafHash: leafHash('') } })))),
    ['reference-broken'],
  ],
  [
    'draws from a line that the purchase does not have',
    () => signedText(unsignedBundle(buildRecord(() => ({ line: 2 })))),
    ['reference-broken'],
  ],
  [
    'draws from something else than a purchase',
    () => {
      const [machine, shelf] = logs();
      const other = new LogBuilder(machineLog, 'machine');
      other.append({ kind: 'opening', sealedAt: '2026-01-01T08:01:00.000Z', parts: { author, body: {} } });
      const purchase = { log: shelfLog, seq: 0, leafHash: at(record.shelf.built, 0).hash };
      const draws = [{ purchase, line: 1 }];
      const refersTo = { seq: 0, leafHash: at(other.built, 0).hash };
      other.append({
        kind: 'addendum',
        sealedAt: '2026-05-01T00:00:00.000Z',
        refersTo,
        parts: { author, body: { draws } },
      });
      return resigned({ logs: [{ ...machine, ...other.toLog() }, shelf], files: [] });
    },
    ['reference-broken'],
  ],
  [
    'lists a file that no entry names',
    () => resigned({ files: [listedReceipt, { ...listedOil, sha256: leafHash('') }] }),
    ['file-unbound'],
  ],
  [
    'lists a file as another kind of file',
    () => resigned({ files: [{ ...listedReceipt, mediaType: 'image/png' }] }),
    ['file-changed'],
  ],
  ['lists a file with another length', () => resigned({ files: [{ ...listedReceipt, bytes: 1 }] }), ['file-changed']],
  [
    'lists a copy of something that no entry names',
    () => resigned({ files: [{ ...listedOil, sha256: leafHash('copy'), derivedFrom: leafHash('') }] }),
    ['file-unbound'],
  ],
];

it.each(forgeries)('a forger who %s is found out', (_, forge, expected) => {
  const codes = codesOf({ bundleText: forge() });
  expect(new Set(codes)).toEqual(new Set(expected));
});

it('a changed line is named itself, and not every line after it', () => {
  const [machine, shelf] = logs();
  at(machine.entries, 1).leaf = at(machine.entries, 1).leaf.replace('08:02', '08:01');
  const { alterations, entries } = verifyBundle({ bundleText: resigned({ logs: [machine, shelf] }), key });
  expect(alterations.filter(({ code }) => code === 'leaf-changed')).toMatchObject([{ log: machineLog, seq: 1 }]);
  expect(entries.map(({ problems }) => problems)).toEqual([[], ['leaf-changed'], ['chain-broken'], [], [], []]);
});

it('a file that lists no key cannot be called unchanged without a key', () => {
  expect(verifyBundle({ bundleText: resigned({ verifierKeys: [] }) })).toMatchObject({
    outcome: 'altered',
    alterations: [{ code: 'unknown-key' }],
    key: null,
  });
  expect(verifyBundle({ bundleText: resigned({ verifierKeys: [] }), key }).outcome).toBe('unchanged');
});

it('another key than the reader’s is found out, and a key that cannot be read is no key', () => {
  expect(codesOf({ bundleText: bundleText(good()), key: keyOf(attacker) })).toEqual(['unknown-key']);
  expect(codesOf({ bundleText: bundleText(good()), key: 'my key' })).toEqual(['unknown-key']);
});

it('a wholly rebuilt record under another key is only found out by who has the key', () => {
  const rebuilt = signedText(
    unsignedBundle(record, {
      verifierKeys: [keyOf(attacker)],
      logs: logs().map((log) => ({
        ...log,
        checkpoint: signNote(parseNote(log.checkpoint).text, attacker),
        entries: log.entries.map((entry) => ({
          ...entry,
          seal: { checkpoint: signNote(parseNote(entry.seal.checkpoint).text, attacker), tokens: [] },
        })),
      })),
    }),
    attacker,
  );
  expect(verifyBundle({ bundleText: rebuilt })).toMatchObject({
    outcome: 'unchanged',
    remarks: [{ code: 'key-from-file' }, {}, {}, {}].slice(0, 3),
  });
  expect(codesOf({ bundleText: rebuilt })).toEqual(['unknown-key']);
});

it.each<[string, { name: string; bytes: Uint8Array }[], AlterationCode[]]>([
  ['the right files', givenFiles, []],
  ['a renamed file', [{ name: 'IMG_1.jpg', bytes: oilBytes }, at(givenFiles, 0)], []],
  ['changed bytes', [{ name: 'oil.jpg', bytes: receiptBytes.slice(1) }], ['file-changed']],
  ['the bytes of two files exchanged', [{ name: 'oil.jpg', bytes: receiptBytes }, { name: 'receipt.jpg', bytes: oilBytes }], ['file-changed']],
  ['a file that nobody names', [...givenFiles, { name: 'note.pdf', bytes: new Uint8Array([1]) }], ['file-unbound']],
])('beside a record, %s', (_, files, expected) => {
  expect(codesOf({ bundleText: bundleText(good()), files })).toEqual(expected);
}); // prettier-ignore

it('a listed file that is not at hand is remarked on, not altered', () => {
  const finding = verifyBundle({ bundleText: bundleText(good()), key, files: givenFiles.slice(0, 1) });
  expect(finding.outcome).toBe('unchanged');
  expect(finding.remarks.find(({ code }) => code === 'file-missing')).toMatchObject({
    count: 1,
    sentence: 'Listed but not here: “oil.jpg”.',
  });
});

it('a copy made later by the installation is remarked on, not altered', () => {
  const copy = { ...listedOil, name: 'oil-copy.jpg', sha256: leafHash('copy'), derivedFrom: listedOil.sha256 };
  const finding = verifyBundle({ bundleText: resigned({ files: [listedOil, copy] }), key });
  expect(finding.outcome).toBe('unchanged');
  expect(finding.remarks.map(({ code }) => code)).toContain('copy-by-installation');
});

it('every finding has a sentence for whoever decides and a line for whoever looks closer', () => {
  for (const [, forge] of forgeries) {
    for (const { sentence, technical } of verifyBundle({ bundleText: forge(), key }).alterations) {
      expect(sentence).toMatch(/^[A-Z].*[.]$/s);
      expect(technical).not.toBe('');
    }
  }
}, 120_000);

it.each([
  [maxBundleKeys, 'unchanged'],
  [maxBundleKeys + 1, 'unreadable'],
])('checks a bad signature with at most a hundred keys: a file that lists %i is %s', (count, outcome) => {
  const verifierKeys = Array.from({ length: count }, () => key);
  expect(verifyBundle({ key, bundleText: resigned({ verifierKeys }) }).outcome).toBe(outcome);
});

it.each([
  [maxBundleLogs, 'altered'],
  [maxBundleLogs + 1, 'unreadable'],
])('checks at most five hundred logs: a file with %i is %s', (count, outcome) => {
  const [machine, shelf] = logs();
  const empty = Array.from({ length: count - 2 }, (_, index) => ({
    ...shelf,
    id: `6f1c2a34-0000-4000-8001-${String(index).padStart(12, '0')}`,
    entries: [],
  }));
  expect(verifyBundle({ key, bundleText: resigned({ logs: [machine, shelf, ...empty] }) }).outcome).toBe(outcome);
});

it.each(listed.map((one) => [one.what, one] as const))(
  'a forger who %s is found out, from the file on',
  async (_, forged) => {
    const { bytes, codes } = forged;
    const file = await bytes();
    if (codes.length === 0) return expect(readContainer(file)).rejects.toMatchObject({ code: 'unreadable' });
    const { bundleText: text } = await readContainer(file);
    expect([...new Set(codesOf({ bundleText: text }))]).toEqual(codes);
  },
);

it('a rewrite signed again with the same key passes alone, and is found out by whoever kept an older file', () => {
  const rewritten = buildRecord(() => ({ amount: '4.5' }));
  const bundleText = signedText(unsignedBundle(rewritten));
  expect(verifyBundle({ key, bundleText }).outcome).toBe('unchanged');
  const older = signedText(unsignedBundle(record, { madeAt: '2026-04-20T00:00:00.000Z' }));
  for (const against of [older, record.machine.seals[2] ?? '']) {
    const finding = verifyBundle({ key, bundleText, against });
    expect(finding.alterations.map(({ code }) => code)).toContain('forked');
    expect(finding.against).toMatchObject({ result: 'forked' });
    expect(finding.against?.notes[0]?.log).toBe(machineLog);
  }
});

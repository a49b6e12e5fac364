import { describe, expect, it } from 'vitest';
import { bundleRecord } from '@/lib/services/bundle-record';
import { parseBundle } from '@/lib/evidence/bundle';
import { openDisclosure } from '@/lib/evidence/disclosure';
import type { BundleEntry } from '@/lib/evidence/format';
import { readToken } from '@/lib/evidence/token';
import { fromBase64 } from '@/lib/evidence/bytes';
import { verifyBundle } from '@/lib/evidence/verify';
import { publishedKeys } from '@/lib/services/log-keys';
import { rotateKey } from '@/lib/services/rotate-key';
import { stampingSettled } from '@/lib/services/stamp-checkpoints';
import { countersignatureBody, odometerPhoto, receiptFront, sealRecord } from '../setup/sealed-record';
import { useTestDatabase } from '../setup/test-database';

useTestDatabase();

const about = { purpose: 'Warranty claim', number: 'W-0001' };
const partsOf = (entry?: BundleEntry) => entry?.parts.map((part) => openDisclosure(part).name);

describe('the bundle of a record', () => {
  it('is unchanged to the verifier that every reader gets, with the key published here', async () => {
    const { machineId, machine, service, seal } = await sealRecord();
    await seal(machine.log, 'countersignature', { body: countersignatureBody }, service);
    await stampingSettled();
    const { text, bundle } = await bundleRecord({ machineId, ...about });
    expect(parseBundle(text)).toEqual(bundle);
    const finding = verifyBundle({ bundleText: text, key: publishedKeys()[0]?.verifierKey });
    expect(finding.alterations).toEqual([]);
    expect(finding.outcome).toBe('unchanged');
    // Withheld are prices, an undrawn purchase and the shelf's opening.
    expect(finding.remarks.map(({ code }) => code)).not.toContain('not-time-stamped');
  });

  it('has every leaf of the machine’s log and of the shelf’s, the machine’s whole and the shelf’s as drawn', async () => {
    const { machineId, machine, shelf, unused, purchase } = await sealRecord();
    await stampingSettled();
    const { bundle } = await bundleRecord({ machineId, ...about });
    const [first, second, ...more] = bundle.logs;
    expect(more).toEqual([]);
    expect(first).toMatchObject({ id: machine.log, subject: 'machine' });
    expect(first?.entries.map(partsOf)).toEqual([
      ['author', 'body', 'identity'],
      ['author', 'body'],
      ['attachments', 'author', 'body', 'notes'],
    ]);
    expect(second).toMatchObject({ id: shelf.log, subject: 'shelf' });
    expect(second?.entries).toHaveLength(3);
    expect(partsOf(second?.entries[0])).toEqual([]);
    expect(partsOf(second?.entries[unused.seq])).toEqual([]);
    expect(partsOf(second?.entries[purchase.seq])).toEqual(['attachments', 'author', 'body', 'supplier']);
    for (const log of bundle.logs) {
      expect(log.entries.map(({ seal }) => seal.tokens.length)).toEqual(log.entries.map(() => 1));
      for (const token of log.entries.flatMap(({ seal }) => seal.tokens)) readToken(fromBase64(token));
    }
  });

  it('lists every attachment and copy of what is open, and names those that go with it', async () => {
    const { machineId } = await sealRecord();
    const name = 'receipt-2026-04-02.jpg';
    const copy = receiptFront.copy?.sha256 ?? '';
    const { text, bundle } = await bundleRecord({ machineId, ...about, included: new Map([[copy, name]]) });
    expect(bundle.files).toEqual([
      {
        sha256: odometerPhoto.sha256,
        name: `${odometerPhoto.sha256}.heic`,
        mediaType: 'image/heic',
        bytes: 61_000,
        included: false,
        derivedFrom: null,
      },
      expect.objectContaining({ sha256: receiptFront.sha256, included: false }),
      { sha256: copy, name, mediaType: 'image/jpeg', bytes: 40_112, included: true, derivedFrom: null },
    ]);
    expect(verifyBundle({ bundleText: text }).outcome).toBe('unchanged');
  });

  it('does not take a file along that no opened entry names', async () => {
    const { machineId } = await sealRecord();
    const included = new Map([['d'.repeat(64), 'stray.jpg']]);
    await expect(bundleRecord({ machineId, ...about, included })).rejects.toThrow('belongs to no opened entry');
  });

  it('is altered to the verifier when one letter of it changes', async () => {
    const { machineId } = await sealRecord();
    const { text } = await bundleRecord({ machineId, ...about });
    expect(verifyBundle({ bundleText: text.replace('Warranty claim', 'Warranty cIaim') }).outcome).toBe('altered');
  });

  it('compares with an older bundle of the same record', async () => {
    const { machineId, machine, service, seal } = await sealRecord();
    const older = await bundleRecord({ machineId, ...about });
    await seal(machine.log, 'addendum', { body: { text: 'Checked hot.' } }, service);
    const newer = await bundleRecord({ machineId, ...about });
    const finding = verifyBundle({ bundleText: newer.text, against: older.text });
    expect(finding.alterations).toEqual([]);
    expect(finding.against).not.toBeNull();
  });

  it('verifies under a new key after a rotation, seals of both keys and all', async () => {
    const { machineId, machine, service, seal } = await sealRecord();
    const oldKey = publishedKeys()[0]?.verifierKey ?? '';
    const { verifierKey: newKey } = await rotateKey();
    expect(newKey).not.toBe(oldKey);
    const before = verifyBundle({ bundleText: (await bundleRecord({ machineId, ...about })).text, key: newKey });
    expect(before.alterations).toEqual([]);
    await seal(machine.log, 'addendum', { body: { text: 'Checked hot.' } }, service);
    const { bundle, text } = await bundleRecord({ machineId, ...about });
    expect(bundle.verifierKeys.slice(0, 2)).toEqual([newKey, oldKey]);
    expect(verifyBundle({ bundleText: text, key: newKey }).alterations).toEqual([]);
    // Whoever holds only the older key is told so, and is not told that all is well.
    expect(verifyBundle({ bundleText: text, key: oldKey }).alterations[0]?.code).toBe('unknown-key');
  });
});

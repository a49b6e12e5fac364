import { createHash } from 'node:crypto';
import fc from 'fast-check';
import { beforeAll, describe, expect, it } from 'vitest';
import { utf8 } from '@/lib/evidence/bytes';
import { readContainer } from '@/lib/evidence/container';
import type { Finding } from '@/lib/evidence/finding';
import { oids } from '@/lib/evidence/oids';
import { verifyBundle } from '@/lib/evidence/verify';
import { contentInfo, signAttributes } from '@/lib/ports/signed-data';
import { ownAuthority } from '@/lib/ports/time-stamp-authority/own';
import {
  holeIn, newCertificate, signedDigest, signedPacket, signerWith, withContents,
} from '../../setup/signed-packet'; // prettier-ignore
import { attacker, buildRecord, givenFiles, installation, keyOf, signedText, unsignedBundle } from './build-record';

// ISO 32000-2, 12.8.1: a signature covers the bytes its ByteRange names. The forgeries are our own: each leaves a file
// that PDF programs open, and must not pass for the packet as it was written.
const own = newCertificate();
const other = newCertificate('forger.example');
const record = buildRecord();
const recordFor = (number: string, packetCertificate: string | null = own.sha256) =>
  signedText(unsignedBundle(record, { number, packetCertificate }));
const packetOf = (recordJson: string, sign = signerWith(own).sign) =>
  signedPacket({ files: [{ name: 'record.json', bytes: utf8(recordJson) }, ...givenFiles], sign });

let packet: Buffer;
beforeAll(async () => {
  packet = await packetOf(recordFor('WM-ABCD-EFGH'));
});

async function check(bytes: Uint8Array, key = keyOf(installation)): Promise<Finding> {
  const { bundleText, files, pages } = await readContainer(bytes);
  return verifyBundle({ bundleText, key, ...(files && { files }), ...(pages && { pages }) });
}
const codes = (finding: Finding) => finding.alterations.map(({ code }) => code);
const remarks = (finding: Finding) => finding.remarks.map(({ code }) => code);
async function refusal(bytes: Uint8Array): Promise<string> {
  const finding = await check(bytes);
  expect(finding).toMatchObject({ outcome: 'altered', pages: 'changed' });
  expect(codes(finding)).toEqual(['pages-changed']);
  return finding.alterations[0]?.technical ?? '';
}
/** Text exchanged for text of the same length, so that every table of the file still fits. */
function exchanged(bytes: Buffer, from: string, to: string): Buffer {
  expect(to).toHaveLength(from.length);
  const at = bytes.indexOf(from, 0, 'latin1');
  expect(at).toBeGreaterThan(0);
  return Buffer.concat([bytes.subarray(0, at), Buffer.from(to, 'latin1'), bytes.subarray(at + from.length)]);
}
const detached = (digest: Uint8Array, chain: typeof own) =>
  contentInfo(signAttributes({ contentType: oids.data, digest, chain }), { chain, withCertificates: true });

describe('pages count as checked', () => {
  it('when the certificate that the record names signed the whole file', async () => {
    const finding = await check(packet);
    expect(finding).toMatchObject({ outcome: 'unchanged', alterations: [], pages: 'checked' });
    expect(remarks(finding)).not.toContain('pages-not-checked');
    expect(finding.notChecked.join()).not.toContain('pages');
  });

  it('also when the signature carries a time stamp', async () => {
    const stamped = await packetOf(recordFor('WM-ABCD-EFGH'), signerWith(own, { stampedBy: [ownAuthority] }).sign);
    const used = ({ start, end }: { start: number; end: number }, bytes: Buffer) =>
      bytes.toString('latin1', start, end).replace(/0*>$/, '').length;
    expect(used(holeIn(stamped), stamped)).toBeGreaterThan(used(holeIn(packet), packet) + 1000);
    expect(await check(stamped)).toMatchObject({ outcome: 'unchanged', pages: 'checked' });
  });

  it('not when the record names no certificate, whatever the pages carry', async () => {
    const finding = await check(await packetOf(recordFor('WM-ABCD-EFGH', null)));
    expect(finding).toMatchObject({ outcome: 'unchanged', pages: 'not-checked' });
    expect(remarks(finding)).toContain('pages-not-checked');
  });

  it('not when the record that names the certificate does not hold itself', async () => {
    const finding = await check(packet, keyOf(attacker));
    expect(finding).toMatchObject({ outcome: 'altered', pages: 'not-checked' });
    expect(codes(finding)).toContain('unknown-key');
  });

  it('not at all for a bare record', async () => {
    expect(await check(utf8(recordFor('WM-ABCD-EFGH')))).toMatchObject({ outcome: 'unchanged', pages: 'none' });
  });
});

describe('pages are changed', () => {
  it('when anything that is drawn or said was changed, lengths kept', async () => {
    expect(await refusal(exchanged(packet, '/MediaBox [ 0 0 595.28', '/MediaBox [ 0 0 195.28'))).toContain('digest');
    expect(await refusal(exchanged(packet, 'D:20260418', 'D:20250418'))).toContain('digest');
  });

  it('when the signature was stripped', async () => {
    const blank = { start: packet.indexOf('/Type /Sig\n'), end: holeIn(packet).end };
    const spaces = Buffer.alloc(blank.end - blank.start, ' ');
    const stripped = Buffer.concat([packet.subarray(0, blank.start), spaces, packet.subarray(blank.end)]);
    expect(await refusal(stripped)).toBe('this PDF has no signature');
  });

  it('when the range was narrowed, even if a signature over the narrower range holds', async () => {
    const { start, end } = holeIn(packet);
    const length = packet.length - end;
    const narrowed = exchanged(packet, `[0 ${start} ${end} ${length}]`, `[0 ${start} ${end} ${length - 7}]`);
    const digest = createHash('sha256').update(narrowed.subarray(0, start)).update(narrowed.subarray(end, -7)).digest();
    expect(await refusal(withContents(narrowed, detached(digest, own)))).toContain('does not cover the whole file');
    const later = exchanged(packet, `[0 ${start} ${end} `, `[1 ${start} ${end} `);
    expect(await refusal(later)).toContain('does not cover the whole file');
  });

  it('when the range leaves out more than the value of Contents', async () => {
    const { start, end } = holeIn(packet);
    const length = packet.length - end;
    for (const [from, to] of [[start - 1, end], [start, end + 1], [start - 10, end + 2], [start + 1, end - 1]] as const) {
      const wider = exchanged(packet, `[0 ${start} ${end} ${length}]`, `[0 ${from} ${to} ${packet.length - to}]`);
      expect(await refusal(wider)).toContain('leaves out other bytes');
    }
  }); // prettier-ignore

  it('when another certificate signed them', async () => {
    const forged = await packetOf(recordFor('WM-ABCD-EFGH'), signerWith(other).sign);
    expect(await refusal(forged)).toBe(`signed with the certificate ${other.sha256}, the record names ${own.sha256}`);
    expect(await refusal(withContents(packet, detached(signedDigest(packet), other)))).toContain(other.sha256);
  });

  it('when the right certificate stands there and another key signed', async () => {
    const forged = withContents(packet, detached(signedDigest(packet), { ...own, key: other.key }));
    expect(await refusal(forged)).toBe('The signature does not hold.');
  });

  it('when a second signature was put in, whoever made it', async () => {
    const { start } = holeIn(packet);
    const second = '/Prop_Build << /Type /Sig >>';
    // In the room that the writer leaves behind the range.
    const room = packet.lastIndexOf(`]${' '.repeat(second.length)}`, start, 'latin1') + 1;
    const doubled = Buffer.concat([packet.subarray(0, room), Buffer.from(second), packet.subarray(room + second.length)]);
    expect(await refusal(doubled)).toContain('2 signatures');
  }); // prettier-ignore

  it('when the record of another packet was put in, though both are signed by the same installation', async () => {
    const text = recordFor('WM-ABCD-EFGH').replace('WM-ABCD-EFGH', 'WM-WXYZ-2345');
    expect(text).not.toBe(recordFor('WM-ABCD-EFGH'));
    const written = await packetOf(recordFor('WM-WXYZ-2345'));
    // Pages of the one, everything else of the other, and the first one's signature over it.
    const { start, end } = holeIn(packet);
    const first = Buffer.from(packet.toString('latin1', start + 1, end - 1), 'hex');
    expect(await refusal(withContents(written, first))).toContain('digest differs');
  });

  it('when bytes hide behind the signature, where nothing is signed', async () => {
    const { start, end } = holeIn(packet);
    const der = Buffer.from(packet.toString('latin1', start + 1, end - 1).replace(/(00)*$/, ''), 'hex');
    expect(await check(withContents(packet, der))).toMatchObject({ pages: 'checked' });
    expect(await refusal(withContents(packet, der, '00000001'))).toContain('stands something that is not signed');
    const last = Buffer.from(packet);
    last[end - 2] = 0x31;
    expect(await refusal(last)).toContain('stands something that is not signed');
    last[end - 2] = 0x20;
    expect(await refusal(last)).toContain('not hexadecimal');
  });

  it('when the signature is cut off or is none', async () => {
    expect(await refusal(withContents(packet, utf8('no signature')))).toBeTruthy();
    expect(await refusal(withContents(packet, new Uint8Array()))).toBeTruthy();
    expect(await refusal(withContents(packet, new Uint8Array([0x30, 0x83, 0xff, 0xff, 0xff])))).toContain('cut off');
    expect(await refusal(withContents(packet, new Uint8Array([0x30, 0x80, 0, 0])))).toContain('cut off');
  });
});

it('a packet that was appended to is still unreadable', async () => {
  const added = Buffer.from('1 0 obj\n<< >>\nendobj\nstartxref\n0\n%%EOF\n');
  await expect(readContainer(Buffer.concat([packet, added]))).rejects.toMatchObject({ code: 'unreadable' });
});

it('no single byte can be changed outside the hole so that the signature still counts', async () => {
  const { start, end } = holeIn(packet);
  const outside = fc.oneof(fc.nat(start - 1), fc.integer({ min: end, max: packet.length - 1 }));
  await fc.assert(
    fc.asyncProperty(outside, fc.integer({ min: 1, max: 255 }), async (at, mask) => {
      const changed = Buffer.from(packet);
      changed[at] = (changed[at] ?? 0) ^ mask;
      try {
        expect((await readContainer(changed)).pages?.state).not.toBe('whole');
      } catch (error) {
        expect(error).toMatchObject({ code: 'unreadable' });
      }
    }),
    { numRuns: 150 },
  );
});

import { describe, expect, it, vi } from 'vitest';
import { checkSignedData } from '@/lib/evidence/cms';
import { utf8 } from '@/lib/evidence/bytes';
import { sha256 } from '@/lib/evidence/hash';
import { oids } from '@/lib/evidence/oids';
import { readToken } from '@/lib/evidence/token';
import { ownAuthority } from '@/lib/ports/time-stamp-authority/own';
import type { TimeStampAuthority } from '@/lib/ports/time-stamp-authority/time-stamp-authority';
import { newCertificate, signedPacket, signerWith } from '../../setup/signed-packet';

const certificate = newCertificate();
const bytes = utf8('all of a file but its signature');
const plenty = 16_384;
const authority = (stamp: TimeStampAuthority['stamp']): TimeStampAuthority => ({ name: 'other', isOwn: false, stamp });
const silent = authority(() => new Promise(() => undefined));
const failing = authority(() => Promise.reject(new Error('no answer')));
/** It answers, but for another request. */
const wrong = authority(async () => new Uint8Array([0x30, 0x00]));

async function signed(stampedBy: TimeStampAuthority[], more: { within?: number; room?: number } = {}) {
  const signer = signerWith(certificate, { stampedBy, ...(more.within && { within: more.within }) });
  const der = new Uint8Array(await signer.sign(sha256(bytes), more.room ?? plenty));
  return { der, checked: checkSignedData({ der, contentType: oids.data, detached: [bytes] }) };
}
const stampsOn = ({ checked }: Awaited<ReturnType<typeof signed>>) => checked.unsigned.get(oids.timeStampToken) ?? [];

describe('the signature over a packet', () => {
  it('names its certificate, says no time of its own, and carries the root beside it', async () => {
    const { checked } = await signed([]);
    expect(checked.signer.sha256).toBe(certificate.sha256);
    expect(checked.signingTime).toBeNull();
    expect(checked.certificates).toHaveLength(2);
  });

  it('carries a time stamp over its own value (RFC 3161 app. A) from the first authority that gives one', async () => {
    const result = await signed([failing, wrong, ownAuthority]);
    const [token, ...more] = stampsOn(result);
    expect(more).toEqual([]);
    const { imprint } = readToken(token ?? new Uint8Array());
    expect(imprint).toEqual(sha256(result.checked.signature));
  });

  it('is made without a time stamp when no authority answers in time', async () => {
    const asked = vi.fn(silent.stamp);
    expect(stampsOn(await signed([{ ...silent, stamp: asked }], { within: 20 }))).toEqual([]);
    expect(asked).toHaveBeenCalledOnce();
  });

  it('is made without a time stamp that would not fit', async () => {
    const bare = await signed([]);
    expect(stampsOn(await signed([ownAuthority], { room: bare.der.length + 100 }))).toEqual([]);
  });
});

it('a signature that does not fit leaves no file that looks signed', async () => {
  const sign = async () => new Uint8Array(plenty + 1);
  await expect(signedPacket({ files: [], sign })).rejects.toThrow('16385 bytes does not fit');
});

import { beforeAll, describe, expect, it } from 'vitest';
import { write } from '@/db/index';
import { entries } from '@/db/models/logs';
import type { PersonRow } from '@/db/models/people';
import { invitations, passkeyChallenges, passkeys } from '@/db/models/proof';
import { updatePerson } from '@/db/queries/people';
import { hashPassword } from '@/lib/auth/password';
import { verifyBundle } from '@/lib/evidence/verify';
import { atTime } from '@/lib/ports/clock';
import { mailNames, readKeptMail } from '@/lib/ports/mail-folder';
import { addPasskey } from '@/lib/services/add-passkey';
import { countersignInput } from '@/lib/services/answer-invitation';
import { beginPasskey } from '@/lib/services/begin-passkey';
import { bundleRecord } from '@/lib/services/bundle-record';
import { inviteCountersigner } from '@/lib/services/invite-countersigner';
import { listPasskeys } from '@/lib/services/list-passkeys';
import { newKeyAnswer, signatureAnswer } from '@/lib/services/passkey-answer';
import { passkeySite } from '@/lib/services/passkey-site';
import { prepareCountersignature } from '@/lib/services/prepare-countersignature';
import { prepareSignature } from '@/lib/services/prepare-signature';
import { readRecord } from '@/lib/services/read-record';
import { removePasskey } from '@/lib/services/remove-passkey';
import { signCountersignature } from '@/lib/services/sign-countersignature';
import { signEntry } from '@/lib/services/sign-entry';
import { buildProofWorld } from '@/tests/setup/proof-world';
import { SoftAuthenticator } from '@/tests/setup/soft-authenticator';
import { makePerson, useTestDatabase } from '@/tests/setup/test-database';

// The environment of the tests names http://localhost:3000.
useTestDatabase();
const password = 'torque-then-mark-31';
const { origin } = passkeySite();
let world: Awaited<ReturnType<typeof buildProofWorld>>;
let passwordHash: string;
const withPassword = async (person: PersonRow) => {
  await write((transaction) => updatePerson(person.id, { passwordHash }, { transaction }));
  return { ...person, passwordHash };
};
beforeAll(async () => {
  passwordHash = await hashPassword(password);
  world = await buildProofWorld();
  world.person = await withPassword(world.person);
  world.technician = await withPassword(world.technician);
});

async function withKey(person: PersonRow, device = new SoftAuthenticator(origin)): Promise<SoftAuthenticator> {
  const question = await beginPasskey({ person, password });
  const answer = newKeyAnswer.parse(device.create(question));
  await addPasskey({ person, challenge: question.id, name: 'Phone', answer });
  return device;
}
const answerOf = (text: string) => signatureAnswer.parse(text);

describe('where keys can be made', () => {
  it.each([
    ['https://records.garage.example', null],
    ['http://localhost:3000', null],
    ['http://192.168.1.20:3000', /a number/],
    ['https://[::1]', /a number/],
    ['http://garage.home.arpa', /over TLS/],
  ])('is said for %s', (address, refusal) => {
    const found = passkeySite(address).refusal;
    if (refusal === null) expect(found).toBeNull();
    else expect(found).toMatch(refusal);
  });
});

describe('a new key', () => {
  it('is asked for only after the password, with user verification and ES256', async () => {
    const person = await withPassword(await makePerson());
    await expect(beginPasskey({ person, password: 'something else' })).rejects.toMatchObject({
      fields: { password: expect.stringContaining('not your present password') },
    });
    const question = await beginPasskey({ person, password });
    expect(question).toMatchObject({
      create: {
        rp: { id: 'localhost' },
        attestation: 'none',
        pubKeyCredParams: [{ alg: -7, type: 'public-key' }],
        authenticatorSelection: { userVerification: 'required', residentKey: 'discouraged' },
      },
    });
  });

  it('is kept once, listed, told by mail, and asked for no second time', async () => {
    const person = await withPassword(await makePerson());
    const device = new SoftAuthenticator(origin);
    const question = await beginPasskey({ person, password });
    const answer = newKeyAnswer.parse(device.create(question));
    const adding = { person, challenge: question.id, name: 'Phone', answer };
    await addPasskey(adding);
    expect(await listPasskeys({ person })).toMatchObject([{ name: 'Phone', lastUsedAt: null, madeFor: null }]);
    await expect(addPasskey(adding)).rejects.toThrow(/used already/);
    const [newest] = await mailNames();
    expect((await readKeptMail(newest!))?.text).toContain('“Phone” was added');
    const next = await beginPasskey({ person, password });
    expect('create' in next && next.create.excludeCredentials).toHaveLength(1);
  });

  it.each<[string, (device: SoftAuthenticator) => SoftAuthenticator, 'P-256' | 'P-384', RegExp]>([
    [
      'made without verifying who is there',
      (device) => Object.assign(device, { flags: 0x01 }),
      'P-256',
      /user could not be verified/,
    ],
    ['made on another site', () => new SoftAuthenticator('http://localhost:4000'), 'P-256', /origin/],
    ['on another curve', (device) => device, 'P-384', /alg/],
  ])('is refused when it was %s, and its challenge is gone', async (_, change, curve, reason) => {
    const person = await withPassword(await makePerson());
    const question = await beginPasskey({ person, password });
    const answer = newKeyAnswer.parse(change(new SoftAuthenticator(origin)).create(question, curve));
    const adding = { person, challenge: question.id, name: 'Phone', answer };
    await expect(addPasskey(adding)).rejects.toMatchObject({ code: 'conflict', log: expect.stringMatching(reason) });
    expect(await listPasskeys({ person })).toEqual([]);
    expect(await passkeyChallenges.find({ id: question.id })).toMatchObject({ usedAt: expect.any(String) });
  });

  it('is refused after five minutes, and for somebody else', async () => {
    const [person, other] = [await withPassword(await makePerson()), await makePerson()];
    const question = await beginPasskey({ person, password });
    const answer = newKeyAnswer.parse(new SoftAuthenticator(origin).create(question));
    const adding = { challenge: question.id, name: 'Phone', answer };
    await expect(addPasskey({ person: other, ...adding })).rejects.toMatchObject({ code: 'not-found' });
    const later = new Date(Date.now() + 5 * 60_000 + 1000);
    await expect(atTime(later, () => addPasskey({ person, ...adding }))).rejects.toThrow(/too long/);
  });

  it('is removed by its owner only, and stays in the table', async () => {
    const [person, other] = [await withPassword(await makePerson()), await makePerson()];
    await withKey(person);
    const [key] = await listPasskeys({ person });
    await expect(removePasskey({ person: other, passkey: key!.id })).rejects.toMatchObject({ code: 'not-found' });
    await removePasskey({ person, passkey: key!.id });
    expect(await listPasskeys({ person })).toEqual([]);
    expect(await passkeys.find({ id: key!.id })).toMatchObject({ revokedAt: expect.any(String) });
  });
});

describe('an owner who signs an entry', () => {
  let device: SoftAuthenticator;
  const ask = () => prepareSignature({ person: world.person, machine: world.machine, seq: world.seq });
  const sign = (challenge: string, text: string) =>
    signEntry({ person: world.person, challenge, answer: answerOf(text) });

  it('is told to add a key first', async () => {
    await expect(ask()).rejects.toThrow(/no key of your own/);
    device = await withKey(world.person);
    expect(await ask()).toMatchObject({ get: { rpId: 'localhost', userVerification: 'required' } });
  });

  it('is not asked for a record that is somebody else’s', async () => {
    const asked = prepareSignature({ person: world.technician, machine: world.machine, seq: world.seq });
    await expect(asked).rejects.toMatchObject({ code: 'not-found' });
  });

  it.each([
    ['for a new key', { type: 'webauthn.create' }, /type/],
    ['over something else', { challenge: 'AAAA' }, /challenge/],
    ['for another site', { rpId: 'elsewhere.example' }, /RP ID/],
  ])('is refused an answer made %s, and that challenge is gone', async (_, change, reason) => {
    const question = await ask();
    await expect(sign(question.id, device.get(question, change))).rejects.toMatchObject({
      code: 'conflict',
      log: expect.stringMatching(reason),
    });
    await expect(sign(question.id, device.get(question))).rejects.toThrow(/used already/);
    expect(await entries.count({ kind: 'signature' })).toBe(0);
  });

  it('has the key named and the signature sealed, once, however often it is sent', async () => {
    const question = await ask();
    const answer = device.get(question);
    const results = await Promise.all([sign(question.id, answer), sign(question.id, answer)]);
    expect(new Set(results.map(({ seq }) => seq)).size).toBe(1);
    expect(results.map(({ isNew }) => isNew).sort()).toEqual([false, true]);
    const later = await ask();
    expect(await sign(later.id, device.get(later))).toMatchObject({ seq: results[0]!.seq, isNew: false });
    expect(await entries.count({ kind: 'key' })).toBe(1);
    expect(await entries.count({ kind: 'signature' })).toBe(1);
    expect(await listPasskeys({ person: world.person })).toMatchObject([{ lastUsedAt: expect.any(String) }]);
  });

  it('is refused when the key counts backwards, and told why', async () => {
    const other = { machine: world.machine, seq: 0 };
    device.count = 5;
    const first = await prepareSignature({ person: world.person, ...other });
    await sign(first.id, device.get(first));
    const again = await prepareSignature({ person: world.person, machine: world.machine, seq: 1 });
    device.count = 3;
    await expect(sign(again.id, device.get(again))).rejects.toThrow(/counter of this key went back/);
    expect(await entries.count({ kind: 'signature' })).toBe(2);
    expect(await entries.count({ kind: 'key' }), 'the key is named once').toBe(1);
    device.count = 9;
  });

  it('cannot sign with a key that was removed', async () => {
    const question = await prepareSignature({ person: world.person, machine: world.machine, seq: 1 });
    for (const { id } of await listPasskeys({ person: world.person })) {
      await removePasskey({ person: world.person, passkey: id });
    }
    await expect(sign(question.id, device.get(question))).rejects.toThrow(/none of yours/);
  });
});

describe('a shop that countersigns with its own key', () => {
  let device: SoftAuthenticator;
  let invitationId: string;
  const input = countersignInput.parse({
    answer: 'countersign',
    capacity: 'inspected',
    // Decomposed: it is signed and sealed in its composed form.
    statement: 'Seen in the cafe\u0301, on the lift.\r\nLevel checked.',
  });
  const answerer = () => ({ person: world.technician, invitationId, shopId: world.shop, cameByAddress: false });

  beforeAll(async () => {
    device = await withKey(world.technician);
    const { person, machine: machineId, seq } = world;
    await inviteCountersigner({ person, machineId, seq, input: { email: world.technician.email, message: '' } });
    invitationId = (await invitations.find({ email: world.technician.email }))!.id;
  });

  it('has its words fixed first, and sealed as they were then even if the shop changes meanwhile', async () => {
    const question = await prepareCountersignature({ ...answerer(), input });
    expect(await entries.count({ kind: 'countersignature' })).toBe(0);
    const { seq } = await signCountersignature({
      ...answerer(),
      challenge: question.id,
      answer: answerOf(device.get(question)),
    });
    const { entries: lines } = await readRecord({ machineId: world.machine });
    expect(lines[seq]).toMatchObject({
      kind: 'countersignature',
      body: { capacity: 'inspected', statement: 'Seen in the café, on the lift.\nLevel checked.' },
      ownSignature: { result: 'holds', signature: { signs: seq, site: origin, person: world.technician.id } },
    });
    expect(lines[world.seq]?.countersignatures[0]?.ownSignature?.result).toBe('holds');
    expect(lines[world.seq]?.signedBy?.map((one) => one.ownSignature?.result)).toEqual(['holds']);
    expect(await invitations.find({ id: invitationId })).toMatchObject({ outcome: 'countersigned', answerSeq: seq });
  });

  it('cannot be answered a second time', async () => {
    await expect(prepareCountersignature({ ...answerer(), input })).rejects.toThrow(/answered already/);
  });

  it('leaves a record that is unchanged, with every signature found by the verifier', async () => {
    const { text } = await bundleRecord({ machineId: world.machine, purpose: '', number: 'WM-TEST-0001' });
    const finding = verifyBundle({ bundleText: text });
    expect(finding.alterations).toEqual([]);
    const signs = finding.entries.flatMap(({ kind, deviceSignature }) =>
      deviceSignature === null ? [] : [`${kind} for ${deviceSignature.signs}`],
    );
    expect(signs).toHaveLength(3);
    expect(signs[0]).toBe(`signature for ${world.seq}`);
  });
});

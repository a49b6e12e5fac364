import { randomUUID } from 'node:crypto';
import { statSync } from 'node:fs';
import path from 'node:path';
import argon2 from 'argon2';
import { notFound } from 'next/dist/client/components/navigation.react-server';
import { beforeEach, describe, expect, test, vi } from 'vitest';
import { write } from '@/db/index';
import { mailTokens, people, relations, sessions, attempts } from '@/db/models/people';
import { findPersonByEmail, findSession } from '@/db/queries/people';
import { cookieName } from '@/lib/auth/cookies';
import { authorise, standingOf } from '@/lib/auth/guard';
import { hashToken } from '@/lib/auth/mail-token';
import { hashPassword, isPassword } from '@/lib/auth/password';
import { readSession } from '@/lib/auth/read-session';
import { sessionKey } from '@/lib/auth/session-key';
import { env } from '@/lib/env';
import { atTime, now } from '@/lib/ports/clock';
import { mailNames, readKeptMail } from '@/lib/ports/mail-folder';
import { changePassword } from '@/lib/services/change-password';
import { confirmEmail } from '@/lib/services/confirm-email';
import { endOneSession, endOtherSessions, readSessions } from '@/lib/services/end-session';
import { admitPasswordReset, requestPasswordReset } from '@/lib/services/request-password-reset';
import { resetPassword } from '@/lib/services/reset-password';
import { signIn } from '@/lib/services/sign-in';
import { signOut } from '@/lib/services/sign-out';
import { signUp } from '@/lib/services/sign-up';
import { makePerson, useTestDatabase } from '@/tests/setup/test-database';

useTestDatabase();

const address = '192.0.2.1';
const password = 'primary chaincase gasket';
const preferences = { distanceUnit: 'km', volumeUnit: 'L', torqueUnit: 'N.m', timeZone: 'Europe/Amsterdam' };
const newEmail = () => `${randomUUID()}@rider.example`;
const here = (email: string, given = password) => ({ email, password: given, address, device: 'Computer' });
const later = <T>(milliseconds: number, work: () => Promise<T>) =>
  atTime(new Date(now().getTime() + milliseconds), work);
const minute = 60_000;
const hour = 60 * minute;

/** The token in the newest mail to this address. */
async function mailedToken(email: string): Promise<string> {
  for (const name of await mailNames()) {
    const mail = await readKeptMail(name);
    const token = mail?.to === email ? /(?:confirm-email|reset-password)\/([\w-]{43})/.exec(mail.text)?.[1] : undefined;
    if (token !== undefined) return token;
  }
  throw new Error(`No mail with a link went to ${email}.`);
}

async function account(): Promise<string> {
  const email = newEmail();
  await signUp({ email, name: 'Imke Vandersloot', password, preferences, address: randomUUID() });
  await confirmEmail({ token: await mailedToken(email), address });
  return email;
}

function nextDigest(): unknown {
  try {
    notFound();
  } catch (error) {
    return (error as { digest: unknown }).digest;
  }
}

beforeEach(async () => {
  await attempts.remove({});
});

describe('signing up', () => {
  test('makes an account only once its link is followed, with the name, password and units chosen', async () => {
    const email = newEmail();
    await signUp({ email, name: 'Imke Vandersloot', password, preferences, address });
    await expect(signIn(here(email))).rejects.toMatchObject({ code: 'invalid-input' });
    await confirmEmail({ token: await mailedToken(email), address });
    const { personId } = await signIn(here(email));
    expect(await people.find({ id: personId })).toMatchObject({ email, name: 'Imke Vandersloot', ...preferences });
  });

  test('gives the same answer, and one mail, to a known address', async () => {
    const email = await account();
    const before = (await mailNames()).length;
    const hash = (await findPersonByEmail(email))?.passwordHash;
    await expect(
      signUp({ email, name: 'Joost', password: 'somebody else’s choice', preferences, address }),
    ).resolves.toBeUndefined();
    expect((await mailNames()).length - before).toBe(1);
    expect(await findPersonByEmail(email)).toMatchObject({ name: 'Imke Vandersloot', passwordHash: hash });
  });

  test('does the work of hashing for a known and an unknown address alike', async () => {
    const email = await account();
    const hash = vi.spyOn(argon2, 'hash');
    await signUp({ email, name: 'Imke', password, preferences, address });
    await signUp({ email: newEmail(), name: 'Imke', password, preferences, address });
    expect(hash).toHaveBeenCalledTimes(2);
  });

  test('confirms what the followed link was mailed for, not what somebody else tried with the address', async () => {
    const email = newEmail();
    await signUp({ email, name: 'Imke', password, preferences, address });
    const own = await mailedToken(email);
    await later(1000, () => signUp({ email, name: 'Joost', password: 'not the owner of this', preferences, address }));
    const foreign = await mailedToken(email);
    await confirmEmail({ token: own, address });
    expect((await findPersonByEmail(email))?.name).toBe('Imke');
    await expect(confirmEmail({ token: foreign, address })).rejects.toMatchObject({ code: 'gone' });
    await expect(signIn(here(email))).resolves.toBeDefined();
  });

  test('a link is good for 24 hours, once', async () => {
    const email = newEmail();
    await signUp({ email, name: 'Imke', password, preferences, address });
    const token = await mailedToken(email);
    await expect(later(24 * hour + 1, () => confirmEmail({ token, address }))).rejects.toMatchObject({ code: 'gone' });
    await later(24 * hour - minute, () => confirmEmail({ token, address }));
    await expect(confirmEmail({ token, address })).rejects.toMatchObject({ code: 'gone' });
  });

  test('a weak password is refused before anything is counted, written or mailed', async () => {
    const email = newEmail();
    const before = (await mailNames()).length;
    await expect(signUp({ email, name: 'Imke', password: 'password1', preferences, address })).rejects.toMatchObject({
      fields: { password: expect.stringContaining('guessed first') as string },
    });
    expect(await findPersonByEmail(email)).toBeNull();
    expect((await mailNames()).length).toBe(before);
    expect(await attempts.count()).toBe(0);
  });

  test('sends at most three mails an hour to one address', async () => {
    const email = newEmail();
    const again = () => signUp({ email, name: 'Imke', password, preferences, address: randomUUID() });
    await again();
    await again();
    await again();
    await expect(again()).rejects.toMatchObject({ code: 'too-many-attempts' });
    await later(hour + 1, again);
  });

  test('keeps no token and no password in the database, only their hashes', async () => {
    const email = newEmail();
    await signUp({ email, name: 'Imke', password, preferences, address });
    const token = await mailedToken(email);
    const row = await mailTokens.find({ tokenHash: hashToken(token) });
    expect(row).not.toBeNull();
    expect(JSON.stringify(await mailTokens.all())).not.toContain(token);
    expect(JSON.stringify([row, await findPersonByEmail(email)])).not.toContain(password);
    expect(row?.detail).toContain('$argon2id$v=19$m=19456,p=1,t=2$');
  });
});

describe('signing in', () => {
  test('verifies a password even for an unknown account, with the same refusal', async () => {
    const email = await account();
    const verify = vi.spyOn(argon2, 'verify');
    const wrong = await signIn(here(email, 'not the password')).catch((error: unknown) => error);
    const unknown = await signIn(here(newEmail(), 'not the password')).catch((error: unknown) => error);
    expect(verify).toHaveBeenCalledTimes(2);
    // The hash an unknown account is measured against costs the same.
    expect(verify.mock.calls[1]?.[0]).toContain('$argon2id$v=19$m=19456,p=1,t=2$');
    expect(unknown).toMatchObject({ code: 'invalid-input' });
    expect(unknown).toEqual(wrong);
  });

  test('begins a session with a new id each time and ends the one the browser held', async () => {
    const email = await account();
    const first = await signIn(here(email));
    const second = await signIn({ ...here(email), previousSession: { id: first.sessionId, personId: first.personId } });
    expect(second.sessionId).not.toBe(first.sessionId);
    expect(await readSession(first.sessionId)).toBeNull();
    expect(await readSession(second.sessionId)).toMatchObject({ person: { email } });
  });

  test('five wrong passwords from one address are answered, the sixth is not, and neither is the right one', async () => {
    const email = await account();
    for (let guess = 1; guess <= 5; guess += 1) {
      await expect(signIn(here(email, `guess ${guess}`))).rejects.toMatchObject({ code: 'invalid-input' });
    }
    await expect(signIn(here(email, 'guess 6'))).rejects.toMatchObject({ code: 'too-many-attempts', status: 429 });
    await expect(signIn(here(email))).rejects.toMatchObject({ code: 'too-many-attempts' });
    await later(15 * minute + 1, () => signIn(here(email)));
  });

  test('guesses at once are counted one by one', async () => {
    const email = await account();
    const outcomes = await Promise.allSettled(Array.from({ length: 12 }, (_, n) => signIn(here(email, `guess ${n}`))));
    const codes = outcomes.map((outcome) => (outcome as { reason: { code: string } }).reason.code);
    expect(codes.filter((code) => code === 'invalid-input')).toHaveLength(5);
    expect(codes.filter((code) => code === 'too-many-attempts')).toHaveLength(7);
  });

  test('guesses from elsewhere do not lock out the owner on a device that signed in before', async () => {
    const email = await account();
    const { personId } = await signIn(here(email));
    const at = now().toISOString();
    // A hundred guesses from a hundred addresses, written straight into the table by their limits' key.
    await signIn({ ...here(email, 'guess'), address: '198.51.100.7' }).catch(() => undefined);
    const accountKey = (await attempts.all()).find(({ key }) => key.startsWith('sign-in-account:'))?.key ?? '';
    await attempts.insertMany(Array.from({ length: 100 }, () => ({ key: accountKey, at })));
    await expect(signIn({ ...here(email), address: '203.0.113.9' })).rejects.toMatchObject({
      code: 'too-many-attempts',
    });
    await expect(signIn({ ...here(email), knownDevice: { id: 'own', people: [personId] } })).resolves.toBeDefined();
  });

  test('one address trying many accounts is stopped', async () => {
    const at = now().toISOString();
    await signIn(here(newEmail(), 'guess')).catch(() => undefined);
    const addressKey = (await attempts.all()).find(({ key }) => key.startsWith('sign-in-address:'))?.key ?? '';
    await attempts.insertMany(Array.from({ length: 49 }, () => ({ key: addressKey, at })));
    await expect(signIn(here(newEmail()))).rejects.toMatchObject({ code: 'too-many-attempts' });
    await expect(signIn({ ...here(newEmail()), address: '203.0.113.9' })).rejects.toMatchObject({
      code: 'invalid-input',
    });
  });

  test('the table of attempts holds neither mail nor network addresses', async () => {
    const email = newEmail();
    await signIn(here(email)).catch(() => undefined);
    const text = JSON.stringify(await attempts.all());
    expect(text).not.toContain(email);
    expect(text).not.toContain(address);
  });
});

describe('a session', () => {
  test('ends on the server: after signing out a kept copy of its id is worth nothing', async () => {
    const { sessionId, personId } = await signIn(here(await account()));
    expect(await readSession(sessionId)).not.toBeNull();
    await signOut({ sessionId, personId });
    expect(await readSession(sessionId)).toBeNull();
    expect((await findSession(sessionId))?.endedAt).not.toBeNull();
  });

  test('ends after 14 days without a visit, and each visit puts that off until the 90th day', async () => {
    const { sessionId } = await signIn(here(await account()));
    expect(await later(14 * 24 * hour + minute, () => readSession(sessionId))).toBeNull();
    for (let day = 13; day < 90; day += 13) {
      expect(await later(day * 24 * hour, () => readSession(sessionId)), `day ${day}`).not.toBeNull();
    }
    expect(await later(90 * 24 * hour + minute, () => readSession(sessionId))).toBeNull();
  });

  test('is marked as seen at most every five minutes', async () => {
    const { sessionId } = await signIn(here(await account()));
    const begun = (await findSession(sessionId))?.lastSeenAt;
    await later(4 * minute, () => readSession(sessionId));
    expect((await findSession(sessionId))?.lastSeenAt).toBe(begun);
    await later(6 * minute, () => readSession(sessionId));
    expect((await findSession(sessionId))?.lastSeenAt).not.toBe(begun);
  });

  test('of somebody else can neither be seen nor ended', async () => {
    const own = await signIn(here(await account()));
    const foreign = await signIn(here(await account()));
    const person = (await people.find({ id: own.personId }))!;
    expect((await readSessions({ person, current: own.sessionId })).map(({ id }) => id)).toEqual([own.sessionId]);
    await expect(endOneSession({ person, session: foreign.sessionId })).rejects.toMatchObject({ code: 'not-found' });
    expect(await readSession(foreign.sessionId)).not.toBeNull();
  });

  test('stays when all others of its person are ended', async () => {
    const email = await account();
    const [first, second, third] = [await signIn(here(email)), await signIn(here(email)), await signIn(here(email))];
    const person = (await people.find({ id: first.personId }))!;
    expect(await endOtherSessions({ person, current: second.sessionId })).toBe(2);
    const alive = await Promise.all([first, second, third].map(({ sessionId }) => readSession(sessionId)));
    expect(alive.map((found) => found !== null)).toEqual([false, true, false]);
  });
});

describe('a forgotten password', () => {
  test('is replaced once by the mailed link, which ends every session', async () => {
    const email = await account();
    const { sessionId } = await signIn(here(email));
    await requestPasswordReset({ email });
    const token = await mailedToken(email);
    await resetPassword({ token, password: 'clutch inspection cover', address });
    expect(await readSession(sessionId)).toBeNull();
    await expect(signIn(here(email))).rejects.toMatchObject({ code: 'invalid-input' });
    await signIn(here(email, 'clutch inspection cover'));
    await expect(resetPassword({ token, password: 'once more with feeling', address })).rejects.toMatchObject({
      code: 'gone',
    });
  });

  test('two uses of one link at once change the password once', async () => {
    const email = await account();
    await requestPasswordReset({ email });
    const token = await mailedToken(email);
    const outcomes = await Promise.allSettled(
      ['the first of the two', 'the other of the two'].map((chosen) =>
        resetPassword({ token, password: chosen, address }),
      ),
    );
    expect(outcomes.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
  });

  test('a link is good for one hour', async () => {
    const email = await account();
    await requestPasswordReset({ email });
    const token = await mailedToken(email);
    const use = () => resetPassword({ token, password: 'clutch inspection cover', address });
    await expect(later(hour + 1, use)).rejects.toMatchObject({ code: 'gone' });
    await later(hour - minute, use);
  });

  test('a weak new password is refused and leaves the link good', async () => {
    const email = await account();
    await requestPasswordReset({ email });
    const token = await mailedToken(email);
    await expect(resetPassword({ token, password: 'password1', address })).rejects.toMatchObject({
      code: 'invalid-input',
    });
    await resetPassword({ token, password: 'clutch inspection cover', address });
  });

  test('sends nothing to an address without an account, and is limited just the same', async () => {
    const email = newEmail();
    const before = (await mailNames()).length;
    await admitPasswordReset({ email, address });
    await requestPasswordReset({ email });
    expect((await mailNames()).length).toBe(before);
    await admitPasswordReset({ email, address });
    await admitPasswordReset({ email, address });
    await expect(admitPasswordReset({ email, address })).rejects.toMatchObject({ code: 'too-many-attempts' });
  });

  test('a confirmation link does not reset a password', async () => {
    const email = newEmail();
    await signUp({ email, name: 'Imke', password, preferences, address });
    const token = await mailedToken(email);
    await expect(resetPassword({ token, password: 'clutch inspection cover', address })).rejects.toMatchObject({
      code: 'gone',
    });
  });
});

describe('changing the password', () => {
  test('asks for the present one, then ends the other sessions and only those', async () => {
    const email = await account();
    const [here1, other] = [await signIn(here(email)), await signIn(here(email))];
    const person = (await people.find({ id: here1.personId }))!;
    const change = (present: string) =>
      changePassword({ person, sessionId: here1.sessionId, password: present, newPassword: 'clutch inspection cover' });
    await expect(change('not it')).rejects.toMatchObject({
      fields: { password: 'This is not your present password.' },
    });
    expect(await readSession(other.sessionId)).not.toBeNull();
    await change(password);
    expect(await readSession(here1.sessionId)).not.toBeNull();
    expect(await readSession(other.sessionId)).toBeNull();
    await signIn(here(email, 'clutch inspection cover'));
  });

  test('five wrong present passwords are answered and the sixth is not', async () => {
    const email = await account();
    const { sessionId, personId } = await signIn(here(email));
    const person = (await people.find({ id: personId }))!;
    const guess = () =>
      changePassword({ person, sessionId, password: 'not it', newPassword: 'clutch inspection cover' });
    for (let n = 0; n < 5; n += 1) await expect(guess()).rejects.toMatchObject({ code: 'invalid-input' });
    await expect(guess()).rejects.toMatchObject({ code: 'too-many-attempts' });
  });
});

describe('a hash', () => {
  test('fits its password and no other, and an account without a password fits none', async () => {
    const hash = await hashPassword(password);
    expect(await isPassword(hash, password)).toBe(true);
    expect(await isPassword(hash, `${password} `)).toBe(false);
    expect(await isPassword('', '')).toBe(false);
    expect(await isPassword('-', '-')).toBe(false);
  });
});

describe('a relation', () => {
  test('counts from its beginning until its end, and the guard reads it at each request', async () => {
    const person = await makePerson();
    const [machine, at] = [randomUUID(), now()];
    const row = { id: randomUUID(), personId: person.id, subjectKind: 'machine', subjectId: machine } as const;
    const until = new Date(at.getTime() + hour).toISOString();
    await relations.insert({ ...row, relation: 'owner', since: at.toISOString(), until });
    const may = (instant: Date) =>
      atTime(instant, () => authorise({ person, action: 'seal', machine })).then(
        () => true,
        () => false,
      );
    expect(await may(new Date(at.getTime() - 1))).toBe(false);
    expect(await may(at)).toBe(true);
    expect(await may(new Date(at.getTime() + hour - 1))).toBe(true);
    expect(await may(new Date(at.getTime() + hour))).toBe(false);
  });

  test('to one machine is none to another, and a stranger is told the machine does not exist', async () => {
    const person = await makePerson();
    const machine = randomUUID();
    await relations.insert({
      id: randomUUID(),
      personId: person.id,
      subjectKind: 'machine',
      subjectId: machine,
      relation: 'helper',
      since: now().toISOString(),
      until: null,
    });
    expect(await standingOf(person, { machine })).toMatchObject({ machine: 'helper', shelf: 'none', shop: 'none' });
    await expect(authorise({ person, action: 'seal', machine })).rejects.toMatchObject({
      code: 'not-found',
      status: 404,
    });
    await expect(authorise({ person, action: 'read-machine', machine: randomUUID() })).rejects.toMatchObject({
      code: 'not-found',
      // Next shows its not-found page for whatever carries this digest of its own error.
      digest: nextDigest(),
    });
  });

  test('an action without its object is a mistake of ours and never allowed', async () => {
    const person = await makePerson({ isSteward: true });
    await expect(authorise({ person, action: 'read-record' })).rejects.toThrow('none was named');
  });
});

describe('the session key', () => {
  test('is made once, kept for its owner alone, and long enough', () => {
    const key = sessionKey();
    expect(key.length).toBeGreaterThanOrEqual(32);
    expect(sessionKey()).toBe(key);
    expect(statSync(path.join(env.dataFolder, 'keys', 'session.key')).mode & 0o777).toBe(0o600);
  });

  test('a cookie of plain http has a plain name', () => {
    expect(env.isSecure).toBe(false);
    expect(cookieName('witnessmark-session')).toBe('witnessmark-session');
  });
});

test('a session row cannot be written outside the queue’s transaction by mistake and be lost', async () => {
  const { sessionId, personId } = await signIn(here(await account()));
  await expect(
    write(async (transaction) => {
      await sessions.update({ id: sessionId }, { endedAt: now().toISOString() }, { transaction });
      throw new Error('undone');
    }),
  ).rejects.toThrow('undone');
  expect(await readSession(sessionId)).toMatchObject({ person: { id: personId } });
});

import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { spawnSync } from 'node:child_process';
import { beforeEach, describe, expect, it, vi } from 'vitest';
import type { PersonRow } from '@/db/models/people';
import { checkpointMails } from '@/db/models/proof';
import { keepersOfMachine } from '@/db/queries/checkpoint-keepers';
import { lastCheckpoint } from '@/db/queries/logs';
import { env } from '@/lib/env';
import * as mailPort from '@/lib/ports/mail';
import { atTime } from '@/lib/ports/clock';
import { mailFolder } from '@/lib/ports/mail-folder';
import { readEml } from '@/lib/ports/mail-eml';
import { agreeToKeep, readKeeper, removeKeeper, stopKeeping } from '@/lib/services/answer-keeper';
import { appendEntry } from '@/lib/services/append-entry';
import { askCheckpointKeeper } from '@/lib/services/ask-checkpoint-keeper';
import { bundleRecord } from '@/lib/services/bundle-record';
import { keeperToken } from '@/lib/services/keeper-address';
import { listKeepers } from '@/lib/services/list-keepers';
import { checkpointMailsSettled, kickCheckpointMails } from '@/lib/services/send-checkpoint-mails';
import { stampingSettled } from '@/lib/services/stamp-checkpoints';
import { makePerson, resetTestDatabase, useTestDatabase } from '../setup/test-database';
import { riderWithMachine } from './services/garage-story';

useTestDatabase();

const address = 'keeper@post.example';
const here = '192.0.2.7';
let person: PersonRow;
let machine = '';
let log = '';
const mails = () =>
  readdirSync(mailFolder())
    .filter((name) => name.endsWith('.eml'))
    .map((name) => ({ raw: readFileSync(path.join(mailFolder(), name), 'utf8'), ...readEml(readFileSync(path.join(mailFolder(), name))) })); // prettier-ignore
const checkpointsMailed = () => mails().filter(({ subject }) => subject.startsWith('Checkpoint of'));
const settled = async () => {
  await checkpointMailsSettled();
  await stampingSettled();
};
let readings = 0;
async function sealReading(): Promise<number> {
  readings += 1;
  const body = { on: '2026-04-18', odometer: { value: String(18_000 + readings), unit: '[mi_i]', instrument: 0 } };
  const { seq } = await appendEntry({ log, kind: 'reading', by: person.id, idempotencyKey: `reading/${readings}`, parts: async () => ({ body }) }); // prettier-ignore
  await settled();
  return seq + 1;
}
const ask = (email = address) => askCheckpointKeeper({ person, machineId: machine, input: { email } });
async function tokenOf(email = address): Promise<string> {
  const keeper = (await keepersOfMachine(machine)).find((row) => row.email === email);
  return keeperToken(keeper?.id ?? '').token;
}
async function keeping(email = address): Promise<string> {
  await ask(email);
  const token = await tokenOf(email);
  await agreeToKeep({ token, address: here });
  return token;
}

beforeEach(async () => {
  await settled();
  await resetTestDatabase();
  rmSync(mailFolder(), { recursive: true, force: true });
  ({ person, machine } = await riderWithMachine());
  const { findLogOf } = await import('@/db/queries/logs');
  log = (await findLogOf(machine))?.id ?? '';
  await settled();
});

describe('an address that is asked to keep checkpoints', () => {
  it('gets one question, and nothing more until somebody there says yes', async () => {
    await ask();
    await sealReading();
    kickCheckpointMails();
    await settled();
    expect(mails().map(({ to, subject }) => [to, subject])).toEqual([
      [address, 'Will you keep checkpoints of a service record?'],
    ]);
    const [question] = mails();
    expect(question?.text).toContain(`${env.url}/keep/${await tokenOf()}`);
    expect(question?.text).toMatch(/\nroot \S{44}\nkey fingerprint /);
  });

  it('is not taken at its word by opening the page: reading changes nothing', async () => {
    await ask();
    const token = await tokenOf();
    expect(await readKeeper({ token, address: here })).toEqual({ state: 'asked' });
    expect(await readKeeper({ token, address: here })).toEqual({ state: 'asked' });
    await agreeToKeep({ token, address: here });
    expect(await readKeeper({ token, address: here })).toEqual({ state: 'keeping' });
    expect(await readKeeper({ token: 'no-such-token', address: here })).toBeNull();
  });

  it('is asked once at a time, twice a quarter, and five of them at most keep a machine’s checkpoints', async () => {
    await ask();
    await expect(ask()).rejects.toMatchObject({
      fields: { email: expect.stringContaining('asked already') as string },
    });
    for (let again = 0; again < 2; again += 1) {
      await removeKeeper({ person, id: (await keepersOfMachine(machine))[0]!.id });
      if (again === 0) await ask();
    }
    await expect(ask()).rejects.toMatchObject({ fields: { email: expect.stringContaining('twice') as string } });
    for (const number of [1, 2, 3, 4, 5]) await ask(`keeper${number}@post.example`);
    await expect(ask('one@more.example')).rejects.toMatchObject({ fields: { email: expect.stringContaining('at most 5') as string } }); // prettier-ignore
  });

  it('is asked three times a week at most, about however many machines and by whomever', async () => {
    const askAnew = async () => {
      const { machine: machineId, person: owner } = await riderWithMachine();
      await askCheckpointKeeper({ person: owner, machineId, input: { email: address } });
    };
    for (let asked = 0; asked < 3; asked += 1) await askAnew();
    const before = mails().length;
    await expect(askAnew()).rejects.toMatchObject({ fields: { email: expect.stringContaining('a week') as string } });
    expect(mails()).toHaveLength(before);
  });

  it('is asked and taken away by an owner alone, and only the owner sees it', async () => {
    await keeping();
    const stranger = await makePerson();
    const [keeper] = await keepersOfMachine(machine);
    await expect(askCheckpointKeeper({ person: stranger, machineId: machine, input: { email: 'x@post.example' } })).rejects.toMatchObject({ code: 'not-found' }); // prettier-ignore
    await expect(removeKeeper({ person: stranger, id: keeper!.id })).rejects.toMatchObject({ code: 'not-found' });
    await expect(listKeepers({ person: stranger, machineId: machine })).rejects.toMatchObject({ code: 'not-found' });
  });
});

describe('a keeper', () => {
  it('gets each checkpoint sealed from then on, once, with the signed note whole and no word of the record', async () => {
    await sealReading();
    const token = await keeping();
    const sizes = [await sealReading(), await sealReading()];
    kickCheckpointMails();
    await settled();
    const sent = checkpointsMailed();
    expect(sent.map(({ subject }) => subject)).toEqual(sizes.map((size) => `Checkpoint of a service record: ${size} entries`)); // prettier-ignore
    const { note, root } = (await lastCheckpoint(log))!;
    const last = sent.at(-1)!;
    expect(last.text).toContain(note);
    expect(last.text).toContain(`entries ${sizes[1]}\nroot ${root}\nkey fingerprint `);
    expect(last.text).toContain('corroboration only');
    for (const word of [person.name, person.email, 'Corvane', 'Sorrel', 'AAACRVSR3NA000417', 'odometer', machine]) {
      expect(last.raw + last.text, word).not.toContain(word);
    }
    expect(last.text).toContain(`${env.url}/keep/${token}`);
    expect(await checkpointMails.count()).toBe(2);
  });

  it('can stop by the button of a mail program (RFC 8058), whose two headers every mail carries', async () => {
    const token = await keeping();
    await sealReading();
    // Long headers are folded (RFC 5322 §2.2.3).
    for (const { raw } of mails()) {
      const head = raw.slice(0, raw.indexOf('\n\n')).replace(/\n[ \t]+/g, ' ');
      expect(head).toContain(`\nList-Unsubscribe: <${env.url}/api/keep/${token}/stop>\n`);
      expect(head).toContain('\nList-Unsubscribe-Post: List-Unsubscribe=One-Click\n');
    }
    await stopKeeping({ token, address: here });
    await stopKeeping({ token, address: here });
    await sealReading();
    expect(checkpointsMailed()).toHaveLength(1);
    expect(await readKeeper({ token, address: here })).toEqual({ state: 'ended' });
    await expect(agreeToKeep({ token, address: here })).rejects.toMatchObject({ code: 'gone' });
  });

  it('never makes a seal fail: a mail that cannot be sent waits, longer each time, and is sent once', async () => {
    await keeping();
    const fails = vi.spyOn(mailPort, 'sendMail').mockRejectedValue(new Error('no connection'));
    const size = await sealReading();
    const row = async () => (await checkpointMails.find({ logId: log, size }))!;
    expect(await row()).toMatchObject({ attempts: 1, sentAt: null, lastError: 'no connection' });
    const pauses: number[] = [];
    let at = (await row()).nextTryAt;
    for (let again = 0; again < 3; again += 1) {
      await atTime(new Date(at), async () => {
        kickCheckpointMails();
        await checkpointMailsSettled();
      });
      pauses.push(Date.parse((await row()).nextTryAt) - Date.parse(at));
      at = (await row()).nextTryAt;
    }
    expect(pauses.map((pause) => pause / 60_000)).toEqual([4, 8, 16]);
    expect((await listKeepers({ person, machineId: machine }))[0]?.waiting).toEqual({ size, nextTryAt: at });
    fails.mockRestore();
    await atTime(new Date(at), async () => {
      kickCheckpointMails();
      kickCheckpointMails();
      await checkpointMailsSettled();
    });
    expect(checkpointsMailed()).toHaveLength(1);
    expect(await row()).toMatchObject({ attempts: 4, sentAt: at });
  });

  it('gets after a restart what a server that died after sealing did not send', async () => {
    await keeping();
    // As if the process had ended between the commit and everything after it.
    const size = await sealReading();
    await checkpointMails.remove({ logId: log });
    rmSync(mailFolder(), { recursive: true });
    kickCheckpointMails();
    await settled();
    expect(checkpointsMailed().map(({ subject }) => subject)).toEqual([`Checkpoint of a service record: ${size} entries`]); // prettier-ignore
  });

  it('gets twelve mails a day at most; then one for the newest, the day after', async () => {
    await keeping();
    let size = 0;
    for (let entry = 0; entry < 15; entry += 1) size = await sealReading();
    expect(checkpointsMailed()).toHaveLength(12);
    const tomorrow = new Date(Date.now() + 25 * 3_600_000);
    await atTime(tomorrow, async () => {
      kickCheckpointMails();
      await checkpointMailsSettled();
    });
    expect(
      checkpointsMailed()
        .map(({ subject }) => subject)
        .at(-1),
    ).toContain(`${size} entries`);
    expect(checkpointsMailed()).toHaveLength(13);
  });

  it('holds a note that the verifier compares with a later record, saved as the mail says', async () => {
    await keeping();
    await sealReading();
    const text = checkpointsMailed()[0]!.text;
    const lines = text.split('\n');
    const first = lines.findIndex((line) => line === `${env.origin}/${log}`);
    const last = lines.findIndex((line) => line.startsWith('— '));
    const folder = mkdtempSync(path.join(env.dataFolder, 'kept-'));
    const [note, record] = [path.join(folder, 'note.txt'), path.join(folder, 'record.json')];
    writeFileSync(note, lines.slice(first, last + 1).join('\r\n'));
    await sealReading();
    writeFileSync(record, (await bundleRecord({ machineId: machine, purpose: '', number: 'WM-KEEP-0001' })).text);
    const run = () =>
      spawnSync('node', ['scripts/verify.mjs', record, '--against', note, '--json'], { encoding: 'utf8' });
    expect(JSON.parse(run().stdout)).toMatchObject({ against: { result: 'consistent' } });
  });
});

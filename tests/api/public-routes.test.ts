import { execFileSync } from 'node:child_process';
import { chmodSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { NextRequest } from 'next/server';
import { beforeAll, describe, expect, it, vi } from 'vitest';
import { GET as getHealth } from '@/app/api/health/route';
import { GET as getKeys } from '@/app/api/log-keys/route';
import { GET as getCheckpoint } from '@/app/api/logs/[log]/checkpoint/route';
import { GET as getPacketRoot } from '@/app/api/packet-certificate/root.pem/route';
import { GET as getRoot } from '@/app/api/time-stamp/root.pem/route';
import { POST as postTimeStamp } from '@/app/api/time-stamp/route';
import { env } from '@/lib/env';
import { parseCheckpoint, parseNote, verifyNote } from '@/lib/evidence/checkpoint';
import { packetCertificate, packetCertificateFile } from '@/lib/ports/packet-certificate';
import { startServerWork } from '@/lib/services/start-server-work';
import { sealRecord } from '../setup/sealed-record';
import { useTestDatabase } from '../setup/test-database';

// Nobody is signed in; Next's cookies exist only inside its server.
vi.mock('next/navigation', () => ({ unstable_rethrow: () => {} }));
vi.mock('@/lib/auth/session', () => ({ currentPerson: async () => null }));

useTestDatabase();

const get = (address: string) => new NextRequest(`http://localhost:3000${address}`);
const noParams = { params: Promise.resolve({}) };
const post = (body: Uint8Array, headers: Record<string, string>) =>
  postTimeStamp(
    new NextRequest('http://localhost:3000/api/time-stamp', { method: 'POST', body: new Uint8Array(body), headers }),
    noParams,
  );
const query = { 'content-type': 'application/timestamp-query' };

describe('the published keys and checkpoints', () => {
  it('let anybody check the newest note of a log', async () => {
    const { machine } = await sealRecord();
    const keys = (await (await getKeys(get('/api/log-keys'), noParams)).json()) as { keys: { verifierKey: string }[] };
    const params = { params: Promise.resolve({ log: machine.log }) };
    const response = await getCheckpoint(get(`/api/logs/${machine.log}/checkpoint`), params);
    expect(response.headers.get('content-type')).toBe('text/plain; charset=utf-8');
    const note = await response.text();
    expect(verifyNote(note, keys.keys[0]?.verifierKey ?? '')).toBe(true);
    expect(parseCheckpoint(parseNote(note).text)).toMatchObject({ log: machine.log, size: 3, origin: env.origin });
  });

  it('tell the note of every earlier size, for ever the same, so that a kept note can be compared', async () => {
    const { machine } = await sealRecord();
    const params = { params: Promise.resolve({ log: machine.log }) };
    const ask = (query: string) => getCheckpoint(get(`/api/logs/${machine.log}/checkpoint${query}`), params);
    const newest = await ask('');
    expect(newest.headers.get('cache-control')).toBe('public, no-cache');
    const older = await ask('?size=2');
    expect(older.headers.get('cache-control')).toBe('public, max-age=31536000, immutable');
    expect(parseCheckpoint(parseNote(await older.text()).text)).toMatchObject({ log: machine.log, size: 2 });
    expect(await (await ask('?size=3')).text()).toBe(await newest.text());
    expect((await ask('?size=4')).status).toBe(404);
    for (const wrong of ['0', '-1', '1.5', '01', '1e3', '', 'x', '9999999999']) {
      expect((await ask(`?size=${wrong}`)).status, wrong).toBe(422);
    }
  });

  it.each(['6f1c2a34-0000-4000-8000-000000000001', 'x', '../keys/log.pem'])(
    'answer “not found” for the log %s',
    async (log) => {
      const response = await getCheckpoint(get('/api/logs/x/checkpoint'), { params: Promise.resolve({ log }) });
      expect(response.status).toBe(404);
      expect(response.headers.get('content-type')).toBe('application/problem+json');
    },
  );
});

describe('the test authority over HTTP', () => {
  it('answers what OpenSSL asks, and OpenSSL accepts it under the published root', async () => {
    const at = (name: string) => path.join(env.dataFolder, name);
    writeFileSync(at('data'), 'a note');
    execFileSync('openssl', ['ts', '-query', '-data', at('data'), '-sha256', '-cert', '-out', at('q')], {
      stdio: 'ignore',
    });
    // Sent from another program: no Origin, no Sec-Fetch-Site.
    const response = await post(readFileSync(at('q')), query);
    expect(response.headers.get('content-type')).toBe('application/timestamp-reply');
    writeFileSync(at('r'), new Uint8Array(await response.arrayBuffer()));
    writeFileSync(at('root.pem'), await (await getRoot(get('/api/time-stamp/root.pem'), noParams)).text());
    const parts = ['ts', '-verify', '-queryfile', at('q'), '-in', at('r'), '-CAfile', at('root.pem')];
    expect(execFileSync('openssl', parts, { encoding: 'utf8', stdio: 'pipe' })).toContain('OK');
  });

  it('refuses another media type, and takes 4096 bytes but not one more', async () => {
    expect((await post(new Uint8Array(10), { 'content-type': 'application/json' })).status).toBe(415);
    expect((await post(new Uint8Array(4096), query)).status).toBe(200);
    expect((await post(new Uint8Array(4097), query)).status).toBe(413);
  });
});

describe('the packet root', () => {
  it('is a root for OpenSSL that issued the certificate packets are signed with, and gives no key away', async () => {
    const response = await getPacketRoot(get('/api/packet-certificate/root.pem'), noParams);
    expect(response.headers.get('content-type')).toBe('application/x-pem-file');
    const pem = await response.text();
    expect(pem).not.toContain('PRIVATE');
    const at = (name: string) => path.join(env.dataFolder, name);
    writeFileSync(at('packet-root.pem'), pem);
    writeFileSync(at('packet-leaf.pem'), packetCertificate().leaf.toString());
    const parts = ['verify', '-x509_strict', '-CAfile', at('packet-root.pem'), at('packet-leaf.pem')];
    expect(execFileSync('openssl', parts, { encoding: 'utf8', stdio: 'pipe' })).toContain('OK');
  });

  it('is refused with a sentence while its file cannot be used, and comes back with it', async () => {
    const file = packetCertificateFile();
    chmodSync(file, 0o644);
    const said = vi.spyOn(console, 'error').mockImplementation(() => {});
    const response = await getPacketRoot(get('/api/packet-certificate/root.pem'), noParams);
    expect(response.status).toBe(503);
    const { title } = (await response.json()) as { title: string };
    expect(title).toContain('packet certificate cannot be used');
    expect(title).not.toContain(file);
    expect(said).toHaveBeenCalledWith(expect.stringContaining(file));
    chmodSync(file, 0o600);
    expect((await getPacketRoot(get('/api/packet-certificate/root.pem'), noParams)).status).toBe(200);
  });
});

describe('the health of the server', () => {
  beforeAll(() => startServerWork());

  it('is good when database, folder and key can be used', async () => {
    const response = await getHealth(get('/api/health'), noParams);
    expect(response.status).toBe(200);
    expect(await response.json()).toEqual({
      ok: true,
      database: 'ok',
      storage: 'ok',
      signingKey: 'ok',
      checkpoints: 'ok',
    });
  });

  it('is bad, without saying why to strangers, when the database has no schema', async () => {
    const errors = vi.spyOn(console, 'error').mockImplementation(() => {});
    const { database } = await import('@/db/index');
    await database().query('ALTER TABLE logs RENAME TO logs_away');
    const response = await getHealth(get('/api/health'), noParams);
    await database().query('ALTER TABLE logs_away RENAME TO logs');
    expect(response.status).toBe(503);
    expect(await response.json()).toMatchObject({ ok: false, database: 'failed', storage: 'ok' });
    expect(errors).toHaveBeenCalledWith('The database does not answer.', expect.anything());
  });
});

describe('the start of the server', () => {
  const restart = async () => {
    vi.resetModules();
    delete (globalThis as { witnessmarkServerWork?: unknown }).witnessmarkServerWork;
    const { startServerWork: start } = await import('@/lib/services/start-server-work');
    return start();
  };

  it.each<[string, (file: string) => void, string]>([
    ['when others can read the signing key', (file) => chmodSync(file, 0o644), 'has mode 0644'],
    ['without the signing key', (file) => rmSync(file), 'is missing'],
    ['with a signing key that is none', (file) => writeFileSync(file, 'nothing'), 'is not a private key in PEM form'],
  ])('goes on %s: it says so, health is bad, records are read and keys told', async (_, spoil, sentence) => {
    const errors = vi.spyOn(console, 'error').mockImplementation(() => {});
    const { machine, seal } = await sealRecord();
    const file = path.join(env.dataFolder, 'keys', 'log.pem');
    const pem = readFileSync(file);
    spoil(file);
    await restart();
    expect(errors).toHaveBeenCalledWith(expect.stringMatching(new RegExp(`^Nothing can be sealed: .*${sentence}`)));
    expect(await (await getHealth(get('/api/health'), noParams)).json()).toMatchObject({
      ok: false,
      signingKey: 'failed',
    });
    const { keys } = (await (await getKeys(get('/api/log-keys'), noParams)).json()) as {
      keys: { verifierKey: string }[];
    };
    const note = await getCheckpoint(get('/x'), { params: Promise.resolve({ log: machine.log }) });
    expect(verifyNote(await note.text(), keys[0]?.verifierKey ?? '')).toBe(true);
    const reading = { body: { odometer: { value: '1', unit: '[mi_i]', instrument: 0 } } };
    await expect(seal(machine.log, 'reading', reading)).rejects.toMatchObject({ code: 'key-unusable', status: 503 });
    rmSync(file, { force: true });
    writeFileSync(file, pem, { mode: 0o600 });
    expect((await seal(machine.log, 'reading', reading)).seq).toBe(3);
  });

  it('says which log is behind, and health says so too', async () => {
    const errors = vi.spyOn(console, 'error').mockImplementation(() => {});
    const { machine } = await sealRecord();
    const file = path.join(env.dataFolder, 'checkpoints', `${machine.log}.note`);
    const other = '6f1c2a34-0000-4000-8000-000000000001';
    // A checkpoint of a log that the database no longer knows.
    const { signNote, checkpointText } = await import('@/lib/evidence/checkpoint');
    const { signerNamed } = await import('@/lib/services/log-keys');
    const text = checkpointText({ origin: env.origin, log: other, size: 2, root: 'a'.repeat(64) });
    writeFileSync(file.replace(machine.log, other), signNote(text, signerNamed(env.origin)));
    await restart();
    expect(errors).toHaveBeenCalledWith(expect.stringContaining(`0 entries of log ${other}, but 2 were given out`));
    const response = await getHealth(get('/api/health'), noParams);
    expect(await response.json()).toMatchObject({ ok: false, checkpoints: 'failed' });
    rmSync(file.replace(machine.log, other));
  });
});

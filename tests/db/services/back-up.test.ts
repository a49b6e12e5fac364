import { existsSync, mkdtempSync, readFileSync, rmSync, statSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { closeDatabase, databaseFile } from '@/db/index';
import { env } from '@/lib/env';
import { blobPath, blobStore } from '@/lib/ports/blob-store';
import { backUp, restore } from '@/lib/services/back-up';
import { bundleRecord } from '@/lib/services/bundle-record';
import { verifyBundle } from '@/lib/evidence/verify';
import { stampingSettled } from '@/lib/services/stamp-checkpoints';
import { sealRecord } from '../../setup/sealed-record';
import { useTestDatabase } from '../../setup/test-database';

useTestDatabase();

let to = '';
beforeAll(() => {
  to = mkdtempSync(path.join(os.tmpdir(), 'witnessmark-backup-'));
});
afterAll(() => rmSync(to, { recursive: true }));

describe('a backup', () => {
  it('is taken while the database is open, copies only what is new, and brings the record back unchanged', async () => {
    const { machineId } = await sealRecord();
    const blob = await blobStore.put(Buffer.from('a receipt, as it was received'));
    await stampingSettled();
    const before = await bundleRecord({ machineId, purpose: 'backup', number: 'WM-BACK-0001' });

    const first = await backUp({ to });
    expect(first.copied).toBeGreaterThan(3);
    // Nothing changed but the database, which is copied each time.
    expect((await backUp({ to })).copied).toBe(1);
    expect(statSync(path.join(to, 'keys', 'log.pem')).mode & 0o777).toBe(0o600);

    await expect(restore({ from: to })).rejects.toThrow(/holds a database already/);

    await closeDatabase();
    for (const suffix of ['', '-wal', '-shm']) rmSync(databaseFile() + suffix, { force: true });
    rmSync(path.join(env.dataFolder, 'blobs'), { recursive: true });
    const { entries } = await restore({ from: to });
    expect(entries).toBeGreaterThan(4);
    expect(readFileSync(blobPath(blob.sha256), 'utf8')).toBe('a receipt, as it was received');

    const after = await bundleRecord({ machineId, purpose: 'backup', number: 'WM-BACK-0001' });
    expect(verifyBundle({ bundleText: after.text }).outcome).toBe('unchanged');
    expect(after.bundle.logs).toEqual(before.bundle.logs);
  });

  it('is refused where there is none, and writes nothing then', async () => {
    await closeDatabase();
    rmSync(databaseFile(), { force: true });
    await expect(restore({ from: path.join(to, 'nowhere') })).rejects.toThrow(/There is no witnessmark\.sqlite/);
    expect(existsSync(databaseFile())).toBe(false);
  });
});

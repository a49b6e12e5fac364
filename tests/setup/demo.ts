import { execFileSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { cpSync, existsSync, readdirSync, readFileSync, renameSync, rmSync, statSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { beforeAll } from 'vitest';
import { env } from '@/lib/env';

const root = path.resolve(import.meta.dirname, '../..');

/**
 * Gives this test file the whole demo in its own data folder. Telling it takes half a minute, so it is told once per
 * state of the sources and copied. Call it once at the top of the file, before `useServer`.
 */
export function useDemo(): void {
  beforeAll(() => {
    const template = path.join(os.tmpdir(), `witnessmark-demo-${fingerprint()}`);
    if (!existsSync(template)) {
      const fresh = `${template}-${process.pid}`;
      const seed = ['--conditions=react-server', path.join(root, 'scripts', 'seed.ts')];
      execFileSync(path.join(root, 'node_modules', '.bin', 'tsx'), seed, {
        cwd: root,
        stdio: 'pipe',
        env: { ...process.env, WITNESSMARK_DATA: fresh, WITNESSMARK_URL: 'http://localhost:3000' },
      });
      renameSync(fresh, template);
    }
    rmSync(env.dataFolder, { recursive: true, force: true });
    cpSync(template, env.dataFolder, { recursive: true, preserveTimestamps: true });
  }, 600_000);
}

function fingerprint(): string {
  const hash = createHash('sha256');
  const visit = (file: string): void => {
    if (statSync(file).isDirectory()) for (const name of readdirSync(file).sort()) visit(path.join(file, name));
    else hash.update(path.relative(root, file)).update(readFileSync(file));
  };
  for (const top of ['db', 'lib', 'scripts/seed.ts']) visit(path.join(root, top));
  return hash.digest('hex').slice(0, 16);
}

import { readFileSync } from 'node:fs';
import path from 'node:path';
import { describe, expect, it } from 'vitest';

// The oldest versions without a published security advisory that touches what is used here.
const floors = {
  next: '16.4.5',
  react: '19.3.1',
  'react-dom': '19.3.1',
  sharp: '0.35.5',
  sequelize: '6.37.8',
  nodemailer: '10.4.1',
} as const;

const lock = JSON.parse(readFileSync(path.join(import.meta.dirname, '../../package-lock.json'), 'utf8')) as {
  packages: Record<string, { version?: string; resolved?: string }>;
};

const numbers = (version: string) => version.split(/[.-]/).slice(0, 3).map(Number);
function isAtLeast(version: string, floor: string): boolean {
  const [have, want] = [numbers(version), numbers(floor)];
  const differing = want.findIndex((part, i) => part !== have[i]);
  return differing === -1 || (have[differing] ?? 0) > (want[differing] ?? 0);
}

describe('the versions in the lock file', () => {
  it.each(Object.entries(floors))('have %s at %s or newer', (name, floor) => {
    const { version } = lock.packages[`node_modules/${name}`] ?? {};
    expect(version).toBeDefined();
    expect(isAtLeast(version ?? '0.0.0', floor), `${name} ${version}`).toBe(true);
  });

  it('name no registry', () => {
    expect(Object.values(lock.packages).filter(({ resolved }) => resolved !== undefined)).toEqual([]);
  });
});

describe('comparing versions', () => {
  it('knows older, same and newer, by number and not by letter', () => {
    expect(isAtLeast('16.4.4', '16.4.5')).toBe(false);
    expect(isAtLeast('16.4.5', '16.4.5')).toBe(true);
    expect(isAtLeast('16.10.0', '16.4.5')).toBe(true);
    expect(isAtLeast('9.99.99', '10.4.1')).toBe(false);
  });
});

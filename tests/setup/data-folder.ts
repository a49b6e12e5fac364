import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll } from 'vitest';

// lib/env reads the environment once, at import, and setup files run before a test file's imports: so every test
// file has a data folder of its own. A test that needs a certain folder sets WITNESSMARK_DATA in its own vi.hoisted.
const folder = mkdtempSync(path.join(tmpdir(), 'witnessmark-test-'));
process.env.WITNESSMARK_DATA = folder;

afterAll(() => rmSync(folder, { recursive: true, force: true }));

import 'server-only';
import { execFile } from 'node:child_process';
import path from 'node:path';
import pLimit, { type LimitFunction } from 'p-limit';
import { WitnessmarkError, invalidInput } from '@/lib/errors';
import type { Finding } from '@/lib/evidence/finding';

const longestCheckMs = 180_000;
/** A finding says again what the opened parts say; the record itself is bounded before. */
const mostFoundBytes = 100_000_000;
const unreadableExit = 2;

/** A large file takes as much memory as it is long: one at a time, whoever asks. */
const shared = globalThis as typeof globalThis & { witnessmarkImportQueue?: LimitFunction };

/**
 * Checks an export in a process of its own, with the very program that readers are given: whatever is in the file,
 * nobody else waits for it. Throws `invalid-input` for a key that was copied badly, and `conflict` if no answer came.
 */
export function checkExportFile(options: { file: string; key?: string; against?: string }): Promise<Finding> {
  shared.witnessmarkImportQueue ??= pLimit(1);
  return shared.witnessmarkImportQueue(() => check(options));
}

function check({ file, key, against }: { file: string; key?: string; against?: string }): Promise<Finding> {
  const program = path.join(/* turbopackIgnore: true */ process.cwd(), 'scripts', 'verify.mjs');
  const given = [...(key === undefined ? [] : [`--key=${key}`]), ...(against === undefined ? [] : [`--against=${against}`])];
  // Nothing of this server's environment is its business.
  const limits = { timeout: longestCheckMs, maxBuffer: mostFoundBytes, env: { NODE_ENV: 'production' as const }, killSignal: 'SIGKILL' as const };
  return new Promise((resolve, reject) => {
    execFile(process.execPath, [program, file, '--json', ...given], limits, (error, stdout, stderr) => {
      const finding = findingIn(stdout);
      if (finding !== null) return resolve(finding);
      const refusal = /The key you gave: ([^\n]+)/.exec(stderr)?.[1];
      if (error?.code === unreadableExit && refusal !== undefined) return reject(invalidInput({ key: refusal }));
      reject(
        new WitnessmarkError('conflict', 'This file could not be checked to its end. Send it again; if it fails again, check it with verify.mjs on a computer.', {
          log: `check of an import: ${error?.message.slice(0, 300)} ${stderr.slice(0, 300)}`,
        }),
      );
    });
  });
} // prettier-ignore

function findingIn(text: string): Finding | null {
  try {
    const value = JSON.parse(text) as Finding;
    return typeof value.outcome === 'string' ? value : null;
  } catch {
    return null;
  }
}

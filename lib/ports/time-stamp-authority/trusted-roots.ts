import 'server-only';
import { readFileSync } from 'node:fs';
import { env } from '@/lib/env';
import { readRoots } from '@/lib/evidence/roots';
import { StampTrust } from '@/lib/evidence/stamp-trust';

let known: { file: string | undefined; trust: StampTrust } | undefined;

/**
 * By which roots this installation's own pages call a stamp independent: those in WITNESSMARK_TIME_STAMP_ROOTS, read
 * once. Throws with a sentence if that file cannot be used. A reader's verifier never asks here.
 */
export function installationTrust(): StampTrust {
  const file = env.timeStampRoots;
  if (known === undefined || known.file !== file) known = { file, trust: new StampTrust(rootsIn(file)) };
  return known.trust;
}

function rootsIn(file: string | undefined): Uint8Array[] {
  if (file === undefined) return [];
  let bytes: Uint8Array;
  try {
    bytes = new Uint8Array(readFileSync(/* turbopackIgnore: true */ file));
  } catch (cause) {
    throw new Error(`WITNESSMARK_TIME_STAMP_ROOTS names ${file}, which cannot be read. Is the path right?`, { cause });
  }
  try {
    return readRoots(bytes);
  } catch (cause) {
    const reason = cause instanceof Error ? cause.message : String(cause);
    throw new Error(`WITNESSMARK_TIME_STAMP_ROOTS names ${file}. ${reason}`, { cause });
  }
}

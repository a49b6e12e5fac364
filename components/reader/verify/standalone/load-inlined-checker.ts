import { sha256Hex } from '@/lib/evidence/hash';
import { utf8 } from '@/lib/evidence/bytes';
import type { checkFile } from '../check-file';
import { type Checker, inWorker } from '../checker';

/** Put in by the build. */
declare const WITNESSMARK_VERSION: string;
export const version = WITNESSMARK_VERSION;

const program = document.getElementById('check-program')?.textContent ?? '';

/** SHA-256 of the check that this copy carries: what is printed with a report. */
export const programHash = sha256Hex(utf8(program));

/** The check out of the page’s own text: beside the page, or in it where a browser refuses that. */
export async function loadInlinedChecker(): Promise<Checker> {
  const address = URL.createObjectURL(new Blob([program], { type: 'text/javascript' }));
  try {
    return await inWorker(new Worker(address));
  } catch {
    return { check: inPage(), stop: () => {} };
  } finally {
    URL.revokeObjectURL(address);
  }
}

function inPage(): typeof checkFile {
  const place = globalThis as unknown as { __witnessmarkCheck?: typeof checkFile };
  if (place.__witnessmarkCheck === undefined) {
    // The page’s policy names this text by its hash, so that it runs and nothing else would.
    const script = document.createElement('script');
    script.textContent = program;
    document.head.append(script);
  }
  if (place.__witnessmarkCheck === undefined) throw new Error('The check could not be started.');
  return place.__witnessmarkCheck;
}

import { readContainer } from '@/lib/evidence/container';
import type { Finding } from '@/lib/evidence/finding';
import { givenKey } from '@/lib/evidence/given-key';
import { verifyBundle } from '@/lib/evidence/verify';

export interface CheckRequest {
  file: ArrayBuffer;
  /** A verifier key or its fingerprint, as typed; empty: the key in the file is used and remarked on. */
  key: string;
  /** An older packet, record.json or signed checkpoint. */
  against: ArrayBuffer | null;
}

export type CheckAnswer =
  | { kind: 'found'; finding: Finding; container: 'packet' | 'record' | null }
  /** What was given beside the file cannot be used; nothing was checked. */
  | { kind: 'refused'; field: 'key' | 'against'; sentence: string };

const sentenceOf = (error: unknown) => (error instanceof Error ? error.message : String(error));

/** Takes a file apart and checks it, in this browser and nowhere else. */
export async function checkFile(request: CheckRequest, tell: (stage: string) => void): Promise<CheckAnswer> {
  tell('Taking the file apart');
  let container: Awaited<ReturnType<typeof readContainer>>;
  try {
    container = await readContainer(new Uint8Array(request.file));
  } catch (error) {
    // The empty text is no record either: the finding keeps its shape, the sentence says why.
    return {
      kind: 'found',
      container: null,
      finding: { ...verifyBundle({ bundleText: '' }), sentence: sentenceOf(error) },
    };
  }
  let against: string | undefined;
  if (request.against !== null) {
    tell('Reading the older file');
    try {
      against = (await readContainer(new Uint8Array(request.against))).bundleText;
    } catch (error) {
      return { kind: 'refused', field: 'against', sentence: `The older file could not be read. ${sentenceOf(error)}` };
    }
  }
  const key = givenKey(request.key, container.bundleText);
  if (key.refusal !== undefined) return { kind: 'refused', field: 'key', sentence: key.refusal };
  tell('Checking every line, seal, part and file');
  const finding = verifyBundle({
    bundleText: container.bundleText,
    ...(container.files === undefined ? {} : { files: container.files }),
    ...(key.verifierKey === undefined ? {} : { key: key.verifierKey }),
    ...(against === undefined ? {} : { against }),
    pagesNotChecked: container.kind === 'packet',
  });
  return { kind: 'found', finding, container: container.kind };
}

import { paths } from '@/lib/paths';
import type { DraftStore, KeptFile, UploadAnswer } from './draft-store';
import { failureOf, type Answer } from './garage-api';
import { without } from './without';

/** Sends one file and tells how far it is, 0 to 1; tests give their own. */
export type SendFile = (
  file: KeptFile,
  blob: Blob,
  onProgress: (share: number) => void,
) => Promise<Answer<UploadAnswer>>;

async function sha256Of(blob: Blob): Promise<string | undefined> {
  // crypto.subtle is absent over plain http; the server hashes what it receives in any case.
  if (!globalThis.crypto?.subtle) return undefined;
  const digest = await crypto.subtle.digest('SHA-256', await blob.arrayBuffer());
  return [...new Uint8Array(digest)].map((byte) => byte.toString(16).padStart(2, '0')).join('');
}

/** XMLHttpRequest, because fetch does not tell how much of a body has been sent. */
export const sendFile: SendFile = async (file, blob, onProgress) => {
  const sha256 = await sha256Of(blob);
  const query = new URLSearchParams({
    id: file.id,
    draft: file.draftId,
    name: file.name,
    ...(sha256 === undefined ? {} : { sha256 }),
  });
  return new Promise((resolve) => {
    const request = new XMLHttpRequest();
    request.open('POST', `${paths.api.uploads}?${query}`);
    request.responseType = 'json';
    request.setRequestHeader('content-type', file.mediaType || 'application/octet-stream');
    request.upload.onprogress = ({ loaded, total }) => onProgress(total > 0 ? loaded / total : 0);
    request.onload = () => {
      const isStored = request.status === 200 || request.status === 201;
      if (isStored && request.response) resolve({ ok: true, value: request.response as UploadAnswer });
      else resolve(failureOf(request.status, (request.response ?? {}) as Record<string, never>));
    };
    request.onerror = request.ontimeout = request.onabort = () => resolve({ ok: false, why: 'no-signal' });
    request.send(blob);
  });
};

/** Sends what waits, one after the other. A refused file is named and set aside; the others go on. */
export async function sendWaitingFiles(
  store: DraftStore,
  draftId: string,
  send: SendFile,
  tell: { progress: (id: string, share: number | undefined) => void; changed: () => Promise<void> },
): Promise<Answer<null>> {
  for (const file of await store.readFiles(draftId)) {
    if (file.state !== 'waiting' || !file.blob) continue;
    tell.progress(file.id, 0);
    const answer = await send(file, file.blob, (share) => tell.progress(file.id, share));
    tell.progress(file.id, undefined);
    // It may have been taken away while it was on its way.
    const current = await store.readFile(file.id);
    if (!current) continue;
    if (answer.ok) {
      await store.putFile({ ...without(current, 'blob'), state: 'sent', answer: answer.value });
    } else if (answer.why === 'refused') {
      await store.putFile({ ...current, state: 'refused', refusal: answer.sentence });
    } else {
      return answer;
    }
    await tell.changed();
  }
  return { ok: true, value: null };
}

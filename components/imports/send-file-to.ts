export interface Sent {
  id?: string;
  /** Why it was not taken. Neither that nor an id: it was stopped by whoever sent it. */
  refusal?: string;
}

/** XMLHttpRequest, because fetch does not tell how much of a body has been sent. */
export function sendFileTo(
  address: string,
  file: File,
  onProgress: (share: number) => void,
): { answer: Promise<Sent>; stop: () => void } {
  const request = new XMLHttpRequest();
  const answer = new Promise<Sent>((resolve) => {
    request.open('POST', address);
    request.responseType = 'json';
    request.setRequestHeader('content-type', 'application/zip');
    request.upload.onprogress = ({ loaded, total }) => onProgress(total > 0 ? loaded / total : 0);
    request.onload = () => {
      const given = (request.response ?? {}) as { id?: string; title?: string };
      if (request.status === 201 && given.id !== undefined) resolve({ id: given.id });
      else resolve({ refusal: given.title ?? 'The server did not take this file. Try again in a while.' });
    };
    request.onerror = request.ontimeout = () =>
      resolve({ refusal: 'The connection broke off before the file had arrived. Send it again.' });
    request.onabort = () => resolve({});
  });
  request.send(file);
  return { answer, stop: () => request.abort() };
}

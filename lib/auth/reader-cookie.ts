import 'server-only';
import type { IronSession } from 'iron-session';
import { cookieOptions, openCookie } from './cookies';

/** What a secret address was swapped for: ids whose rows decide, at every request, whether they still count. */
export interface ReaderCookie {
  links?: string[];
  invitations?: string[];
}

const keptDays = 30;
/** Of each kind. A cookie holds 4096 bytes, and fifty ids take some 2900 once they are sealed. */
export const mostKept = 25;

export const readerCookieOptions = () => cookieOptions('witnessmark-reader', keptDays);

export function readerCookie(): Promise<IronSession<ReaderCookie>> {
  return openCookie<ReaderCookie>(readerCookieOptions());
}

/** Remembers that this browser came with the right address. */
export async function keepReading(kind: keyof ReaderCookie, id: string): Promise<void> {
  const cookie = await readerCookie();
  cookie[kind] = [id, ...(cookie[kind] ?? []).filter((kept) => kept !== id)].slice(0, mostKept);
  await cookie.save();
}

export async function isReading(kind: keyof ReaderCookie, id: string): Promise<boolean> {
  return ((await readerCookie())[kind] ?? []).includes(id);
}

import { paths } from '@/lib/paths';

/** Where signing in may lead: the first part of every page that needs a person. */
const roots: readonly string[] = [
  paths.start,
  paths.account,
  paths.garage,
  paths.steward,
  '/machines',
  '/shelves',
  '/worksheets',
  '/shops',
  '/countersign',
];

/**
 * A `next` parameter as a path of this installation, or null: another host, a scheme, a backslash or a path outside
 * the known pages is refused, so a link to the sign-in page cannot lead anywhere else.
 *
 * @example localPath('//elsewhere.example/x') // null
 * @example localPath('/machines/6f1b/record') // '/machines/6f1b/record'
 */
export function localPath(given: unknown): string | null {
  if (typeof given !== 'string' || given.length > 500 || !/^\/[A-Za-z0-9\-_~./?=&%#]*$/.test(given)) return null;
  // The parser folds `//`, `..` and their encodings; what it makes of the path is what a browser will follow.
  const url = new URL(given, 'http://here.example');
  if (url.origin !== 'http://here.example' || url.pathname.includes('//')) return null;
  const isKnown = roots.some((root) => url.pathname === root || url.pathname.startsWith(`${root}/`));
  return isKnown ? url.pathname + url.search + url.hash : null;
}

/** The sign-in page, leading back to `from` where that is a path of ours. */
export function signInPath(from: unknown): string {
  const next = localPath(from);
  return next === null ? paths.signIn : `${paths.signIn}?next=${encodeURIComponent(next)}`;
}

/** A page number from the address; anything else is the first page. */
export function pageNumber(given: unknown): number {
  return typeof given === 'string' && /^[1-9][0-9]{0,5}$/.test(given) ? Number(given) : 1;
}

/** The pager's words and links for lists whose newest line comes first. */
export function pagerOf(options: { path: string; what: string; page: number; perPage: number; total: number }) {
  const { path, what, page, perPage, total } = options;
  const first = Math.min((page - 1) * perPage + 1, total);
  const last = Math.min(page * perPage, total);
  const addressOf = (wanted: number) => `${path}${path.includes('?') ? '&' : '?'}page=${wanted}`;
  return {
    previousHref: page > 1 ? addressOf(page - 1) : undefined,
    nextHref: last < total ? addressOf(page + 1) : undefined,
    words: `${what} ${first} to ${last} of ${total}`,
  };
}

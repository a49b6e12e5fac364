const linesOnAPage = 25;

export interface PageQuery {
  page?: string | string[] | undefined;
}

/**
 * One page of a list that stands newest first, with the addresses of its neighbours. A page that is no number or lies
 * beyond the list is taken as the nearest there is.
 *
 * @example pageOf(entries, { page: '2' }, '/record').words // '26 to 30 of 30'
 */
export function pageOf<T>(
  list: readonly T[],
  { page }: PageQuery,
  address: string,
): { shown: T[]; words: string; newer: string | undefined; older: string | undefined } {
  const last = Math.max(1, Math.ceil(list.length / linesOnAPage));
  const asked = typeof page === 'string' && /^\d{1,6}$/.test(page) ? Number(page) : 1;
  const at = Math.min(last, Math.max(1, asked));
  const from = (at - 1) * linesOnAPage;
  const shown = list.slice(from, from + linesOnAPage);
  const addressOf = (one: number): string => (one === 1 ? address : `${address}?page=${one}`);
  return {
    shown,
    words: `${from + 1} to ${from + shown.length} of ${list.length}`,
    newer: at > 1 ? addressOf(at - 1) : undefined,
    older: at < last ? addressOf(at + 1) : undefined,
  };
}

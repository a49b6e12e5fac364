import { notFound } from 'next/navigation';

/** The number of an entry out of an address; anything else is no page. */
export function seqFrom(asked: string): number {
  if (!/^(0|[1-9]\d{0,8})$/.test(asked)) notFound();
  return Number(asked);
}

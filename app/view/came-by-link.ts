import { notFound, redirect } from 'next/navigation';
import { z } from 'zod';
import { orNotFound } from '@/lib/auth/guard';
import { isReading } from '@/lib/auth/reader-cookie';
import { WitnessmarkError } from '@/lib/errors';
import { paths } from '@/lib/paths';

/**
 * For pages behind a viewing link: reads what the link shows, if this browser came by its address and the link still
 * counts. A page cannot answer 410, so an ended link leads to the address that does.
 */
export async function cameByLink<T>(
  link: string,
  read: (cameBy: { id: string; cameByAddress: boolean }) => Promise<T>,
): Promise<T> {
  if (!z.uuid().safeParse(link).success) notFound();
  const cameByAddress = await isReading('links', link);
  const found = await orNotFound(read({ id: link, cameByAddress })).catch((error: unknown) => {
    if (error instanceof WitnessmarkError && error.code === 'gone') return null;
    throw error;
  });
  if (found === null) redirect(paths.viewingEnded(link));
  return found;
}

import { route } from '@/lib/auth/route';
import { confirmReceipt } from '@/lib/services/confirm-receipt';

/** Seals the receipt on its shelf's log. A repeated call returns the first answer. */
export const POST = route<{ draft: string }>({ access: 'signed-in' }, async ({ person, params }) => {
  const { log, seq } = await confirmReceipt({ person, draftId: params.draft });
  return Response.json({ log, seq });
});

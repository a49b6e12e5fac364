import { route } from '@/lib/auth/route';
import { readJson } from '@/lib/services/read-json';
import { draftView } from '@/lib/services/read-draft';
import { startDraft, startDraftInput } from '@/lib/services/start-draft';

/** `POST {id, kind, subject}`: 201 when the draft is new, 200 with the same answer when it is there already. */
export const POST = route({ access: 'signed-in' }, async ({ request, person }) => {
  const input = await readJson(request, startDraftInput);
  const { draft, isNew } = await startDraft({ person, input });
  return Response.json({ draft: draftView(draft) }, { status: isNew ? 201 : 200 });
});

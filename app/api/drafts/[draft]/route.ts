import { route } from '@/lib/auth/route';
import { appendChangesInput, appendDraftChanges, sinceInput } from '@/lib/services/append-draft-changes';
import { discardDraft } from '@/lib/services/discard-draft';
import { moveWorksheet, moveWorksheetInput } from '@/lib/services/move-worksheet';
import { readDraft } from '@/lib/services/read-draft';
import { readJson } from '@/lib/services/read-json';

type Params = { draft: string };

export const GET = route<Params>({ access: 'signed-in' }, async ({ person, params }) =>
  Response.json(await readDraft({ person, draftId: params.draft })),
);

/** `POST ?since= {changes}`: what was accepted, what was refused, and what the device lacks. */
export const POST = route<Params>({ access: 'signed-in' }, async ({ request, person, params }) => {
  const { changes } = await readJson(request, appendChangesInput);
  const since = sinceInput.parse(request.nextUrl.searchParams.get('since') ?? undefined);
  return Response.json(await appendDraftChanges({ person, draftId: params.draft, input: { changes, since } }));
});

/** `PATCH {subject}` moves a worksheet to another machine. */
export const PATCH = route<Params>({ access: 'signed-in' }, async ({ request, person, params }) => {
  const input = await readJson(request, moveWorksheetInput);
  return Response.json({ draft: await moveWorksheet({ person, draftId: params.draft, input }) });
});

export const DELETE = route<Params>({ access: 'signed-in' }, async ({ person, params }) => {
  await discardDraft({ person, draftId: params.draft });
  return new Response(null, { status: 204 });
});

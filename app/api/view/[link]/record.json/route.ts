import { viewRoute } from '@/app/api/view/view-route';
import { readScope } from '@/lib/domain/stored-scope';
import { bundleRecord } from '@/lib/services/bundle-record';

/** The record as it stands now. The label of a link is its owner's, and stays out of it. */
export const GET = viewRoute<{ link: string }>(async ({ link }) => {
  const { text } = await bundleRecord({
    machineId: link.machineId,
    purpose: 'to be read through a viewing link',
    scope: readScope(link.scope),
    number: `viewing link ${link.id.slice(0, 8)}`,
  });
  return new Response(text, {
    headers: { 'content-type': 'application/json', 'content-disposition': 'attachment; filename="record.json"' },
  });
});

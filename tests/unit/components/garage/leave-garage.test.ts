import { describe, expect, it } from 'vitest';
import { countUnsentDrafts, leaveGarage } from '@/components/garage/leave-garage';
import { memoryStore } from '@/components/garage/memory-store';

async function store() {
  const kept = memoryStore();
  await kept.putNote('garage', { person: { id: 'imke' } });
  for (const id of ['sent', 'unsent', 'photo']) {
    await kept.putDraft({
      id, kind: 'worksheet', subject: 'sorrel', person: 'imke', createdAt: '', changedAt: '', isOnServer: true, state: 'open',
    }); // prettier-ignore
    const change = { id: `${id}-1`, draftId: id, field: 'title', value: 'Oil', deviceAt: '2026-04-18T10:00:00.000Z' };
    await kept.putChanges(id, [{ ...change, isSent: id !== 'unsent' }]);
  }
  await kept.putFile({
    id: 'f', draftId: 'photo', name: 'a.jpg', bytes: 1, mediaType: 'image/jpeg', addedAt: '', state: 'waiting',
  }); // prettier-ignore
  return kept;
}
const ids = async (kept: Awaited<ReturnType<typeof store>>) => (await kept.readDrafts()).map(({ id }) => id);

describe('signing out', () => {
  it('counts the drafts that hold something only this device has', async () => {
    expect(await countUnsentDrafts(await store())).toBe(2);
  });
  it('clears what the server has and keeps unsent changes and photos', async () => {
    const kept = await store();
    await leaveGarage(kept, 'keep');
    expect(await ids(kept)).toEqual(['unsent', 'photo']);
    expect(await kept.readNote('garage')).toBeUndefined();
  });
  it('clears everything when that is chosen', async () => {
    const kept = await store();
    await leaveGarage(kept, 'delete');
    expect(await ids(kept)).toEqual([]);
  });
});

import 'server-only';
import { randomUUID } from 'node:crypto';
import { addendumFrom, addendumShown } from '@/lib/domain/addendum';
import { atTime } from '@/lib/ports/clock';
import { sealAddendum } from '@/lib/services/seal-addendum';
import { startDraft } from '@/lib/services/start-draft';
import { strikeEntry } from '@/lib/services/strike-entry';
import type { StoryAddendum, StoryStrike } from './story-types';
import { change, instantAt, minutesAfter, sendPicture, svgOf, type Garage } from './tell-story';

/** An entry withdrawn, for a reason. */
export async function tellStrike(garage: Garage, strike: StoryStrike, seq: number): Promise<void> {
  const input = { reason: strike.reason, key: randomUUID() };
  await atTime(new Date(instantAt(strike.on, strike.time)), () =>
    strikeEntry({ person: garage.owner, subject: { machine: garage.machine }, seq, input }),
  );
}

/** Written and photographed a few minutes before it is sealed. */
export async function tellAddendum(garage: Garage, addendum: StoryAddendum, seq: number): Promise<void> {
  const { owner: person, machine } = garage;
  const { text, photo } = addendum;
  const sealed = instantAt(addendum.on, addendum.time);
  const [written, draft] = [minutesAfter(sealed, -4), randomUUID()];
  const shown = await atTime(written, async () => {
    await startDraft({ person, input: { id: draft, kind: 'addendum', subject: machine, refersToSeq: seq } });
    const svg = svgOf(photo, { on: addendum.on, odometer: '' });
    const id = await sendPicture({ garage, draft, name: `${photo.role}.jpg`, svg, at: minutesAfter(sealed, -6) });
    const fields: [string, string][] = [
      ['text', text],
      [`photos/${id}/position`, '1'],
      [`photos/${id}/role`, photo.role],
      [`photos/${id}/caption`, photo.caption],
    ];
    await change(person, draft, fields, written);
    return addendumShown(addendumFrom(Object.fromEntries(fields)));
  });
  await atTime(new Date(sealed), () => sealAddendum({ person, input: { draft, shown } }));
}

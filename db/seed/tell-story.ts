import 'server-only';
import { randomUUID } from 'node:crypto';
import type { PersonRow } from '../models/people';
import { instantOf } from '@/lib/domain/instants';
import { proposeDraws } from '@/lib/domain/shelf';
import type { UnitCode } from '@/lib/evidence/format';
import { sumAmounts } from '@/lib/domain/units';
import { atTime } from '@/lib/ports/clock';
import { appendDraftChanges } from '@/lib/services/append-draft-changes';
import { confirmReceipt } from '@/lib/services/confirm-receipt';
import { shelfWithLots } from '@/lib/services/read-shelf-lots';
import { receiveUpload } from '@/lib/services/receive-upload';
import { sealWorksheet } from '@/lib/services/seal-worksheet';
import { startDraft } from '@/lib/services/start-draft';
import { magnetSvg, odometerSvg, partSvg, plugSvg } from './draw-photo';
import { receiptBackSvg, receiptSvg } from './draw-receipt';
import { photograph } from './photograph';
import { fieldsOfPurchase, fieldsOfWork, totalOf, type FieldValues, type Wanted } from './story-fields';
import { shops, type StoryPhoto, type StoryPurchase, type StoryWork } from './story-types';

/** Everything happens in one town. */
export const zone = 'America/Denver';

export interface Garage {
  owner: PersonRow;
  helper: PersonRow;
  machine: string;
  shelf: string;
}

export const minutesAfter = (instant: string, minutes: number) => new Date(Date.parse(instant) + minutes * 60_000);
export const instantAt = (date: string, time: string) => instantOf({ date, time, zone });

/** One receipt: photographed at the counter, confirmed, and so sealed on the shelf. Returns its seq. */
export async function tellPurchase(garage: Garage, purchase: StoryPurchase): Promise<number> {
  const bought = instantAt(purchase.on, purchase.time);
  const draft = randomUUID();
  return atTime(minutesAfter(bought, 4), async () => {
    await startDraft({ person: garage.owner, input: { id: draft, kind: 'receipt', subject: garage.shelf } });
    const front = await sendPicture({
      garage,
      draft,
      name: 'receipt.jpg',
      svg: receiptSvg(printed(purchase)),
      at: minutesAfter(bought, 3),
    });
    const photos: FieldValues = [[`photos/${front}/role`, 'receipt-front']];
    if (purchase.back !== undefined) {
      const svg = receiptBackSvg(purchase, purchase.back);
      const back = await sendPicture({ garage, draft, name: 'back.jpg', svg, at: minutesAfter(bought, 3) });
      photos.push([`photos/${back}/role`, 'receipt-back'], [`photos/${back}/caption`, 'With the rider’s note']);
    }
    await change(garage.owner, draft, [...fieldsOfPurchase(purchase, zone), ...photos], minutesAfter(bought, 4));
    return (await confirmReceipt({ person: garage.owner, draftId: draft })).seq;
  });
}

/** One service from the first field to its seal; an interrupted one stays open. Returns its seq. */
export async function tellWork(garage: Garage, work: StoryWork): Promise<number | null> {
  const [from, to] = [instantAt(work.on, work.from), instantAt(work.on, work.to)];
  const spread = (n: number, of: number) =>
    minutesAfter(from, (n / (of + 1)) * ((Date.parse(to) - Date.parse(from)) / 60_000));
  const draft = randomUUID();
  const { fields, wanted } = fieldsOfWork(work, {
    zone,
    owner: garage.owner.id,
    stepAt: (n, of) => spread(n, of).toISOString(),
  });
  await atTime(new Date(from), () =>
    startDraft({ person: garage.owner, input: { id: draft, kind: 'worksheet', subject: garage.machine } }),
  );
  const ended = minutesAfter(to, -1);
  await atTime(ended, async () => {
    for (const [i, photo] of work.photos.entries()) {
      const id = await sendPicture({
        garage,
        draft,
        name: `${photo.role}.jpg`,
        svg: svgOf(photo, work),
        at: spread(i + 1, work.photos.length),
      });
      fields.push([`photos/${id}/role`, photo.role], [`photos/${id}/position`, String(i + 1)]);
      if ('caption' in photo) fields.push([`photos/${id}/caption`, photo.caption]);
    }
    fields.push(...(await drawsOf(garage, wanted, work.on)));
    const helped = work.withHelper === true ? fields.filter(([field]) => field.includes('/inspections/')) : [];
    if (helped.length > 0) await change(garage.helper, draft, helped, ended);
    await change(
      garage.owner,
      draft,
      fields.filter((pair) => !helped.includes(pair)),
      ended,
    );
  });
  if (work.stoppedAfter !== undefined) return null;
  const sealed =
    work.sealed === undefined ? minutesAfter(to, 20) : new Date(instantAt(work.sealed.on, work.sealed.time));
  return atTime(sealed, async () => (await sealWorksheet({ person: garage.owner, draftId: draft })).seq);
}

/** Which lots each fill and part comes from: by product, oldest first. What no lot has stays uncovered. */
async function drawsOf(garage: Garage, wanted: Wanted[], on: string): Promise<FieldValues> {
  const { lots } = await shelfWithLots(garage.shelf);
  const byPath = new Map<string, Wanted[]>();
  for (const one of wanted) byPath.set(one.path, [...(byPath.get(one.path) ?? []), one]);
  const fields: FieldValues = [];
  const left = [...lots];
  for (const same of byPath.values()) {
    const [first] = same;
    if (first === undefined) continue;
    const amount = sumAmounts(same.map((one) => ({ amount: one.amount, unit: one.unit as UnitCode })));
    const { draws } = proposeDraws(
      left.filter(({ product }) => product === first.product),
      amount,
      on,
    );
    draws.forEach((draw, i) => {
      const path = `${first.path}/draws/d${i + 1}`;
      fields.push([`${path}/lot`, draw.lot.key], [`${path}/amount`, draw.amount], [`${path}/unit`, draw.unit]);
      const at = left.findIndex(({ key }) => key === draw.lot.key);
      left[at] = { ...draw.lot, balance: draw.balanceAfter };
    });
  }
  return fields;
}

export function svgOf(photo: StoryPhoto, work: Pick<StoryWork, 'on' | 'odometer'>): string {
  if (photo.role === 'odometer') return odometerSvg(work.odometer, 'mi', work.on);
  if (photo.role === 'magnet') return magnetSvg(photo.grade, work.on);
  if (photo.role === 'part') return partSvg(photo.name, photo.number, work.on);
  return plugSvg(work.on);
}

const months = 'Jan Feb Mar Apr May Jun Jul Aug Sep Oct Nov Dec'.split(' ');

function printed(purchase: StoryPurchase): Parameters<typeof receiptSvg>[0] {
  const [year, month, day] = purchase.on.split('-');
  const { name, address } = shops[purchase.shop];
  return {
    shop: name,
    address,
    when: `${Number(day)} ${months[Number(month) - 1]} ${year} ${purchase.time}`,
    lines: purchase.lines.map((line) => ({
      text: [line.printed ?? line.product, line.partNumber, line.quantity === undefined ? '' : `x${line.quantity}`]
        .filter(Boolean)
        .join(' '),
      price: line.price,
    })),
    total: totalOf(purchase),
    number: purchase.number,
    faded: purchase.faded,
  };
}

export async function sendPicture(options: {
  garage: Garage;
  draft: string;
  name: string;
  svg: string;
  at: Date;
}): Promise<string> {
  const { garage, draft, name, svg, at } = options;
  const picture = await photograph(svg, cameraNote(at), `${draft}${name}`);
  const id = randomUUID();
  async function* body() {
    yield picture;
  }
  await receiveUpload({
    person: garage.owner,
    query: { id, draft, name },
    body: body(),
    declaredBytes: picture.length,
  });
  return id;
}

function cameraNote(at: Date): { local: string; offset: string } {
  const parts = new Intl.DateTimeFormat('en-CA', {
    timeZone: zone, hourCycle: 'h23', timeZoneName: 'longOffset',
    year: 'numeric', month: '2-digit', day: '2-digit', hour: '2-digit', minute: '2-digit', second: '2-digit',
  }).formatToParts(at); // prettier-ignore
  const part = (type: Intl.DateTimeFormatPartTypes) => parts.find((one) => one.type === type)?.value ?? '';
  return {
    local: `${part('year')}:${part('month')}:${part('day')} ${part('hour')}:${part('minute')}:${part('second')}`,
    offset: part('timeZoneName').replace('GMT', '') || '+00:00',
  };
}

export async function change(person: PersonRow, draftId: string, fields: FieldValues, at: Date): Promise<void> {
  const deviceAt = at.toISOString();
  for (let i = 0; i < fields.length; i += 400) {
    const changes = fields.slice(i, i + 400).map(([field, value]) => ({ id: randomUUID(), field, value, deviceAt }));
    const { refused } = await appendDraftChanges({ person, draftId, input: { changes } });
    if (refused.length > 0) throw new Error(`The story was refused: ${JSON.stringify(refused)}`);
  }
}

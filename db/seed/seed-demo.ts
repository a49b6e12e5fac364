import 'server-only';
import { randomUUID } from 'node:crypto';
import { write } from '../index';
import { people, relations, type PersonRow } from '../models/people';
import { findLogOf } from '../queries/logs';
import { invitationsToEmail } from '../queries/invitations';
import { shelves } from '../models/machines';
import { atTime } from '@/lib/ports/clock';
import { answerInvitation } from '@/lib/services/answer-invitation';
import { confirmShop } from '@/lib/services/confirm-shop';
import { createMachine } from '@/lib/services/create-machine';
import { createShop } from '@/lib/services/create-shop';
import { inviteCountersigner } from '@/lib/services/invite-countersigner';
import { machineInput } from '@/lib/services/machine-input';
import { buildPerson } from './build-person';
import { demoAccounts, type DemoRole } from './demo-accounts';
import { sorrelAddenda, sorrelStrikes, wrongMachineWork } from './story-later';
import { sorrelCountersignatures, sorrelPurchases, sorrelWorks } from './story-sorrel';
import { openGearboxWork } from './story-open';
import { wrenPurchases, wrenWorks } from './story-wren';
import { tellAddendum, tellStrike } from './tell-later';
import { instantAt, minutesAfter, tellPurchase, tellWork, zone, type Garage } from './tell-story';
import type { StoryCountersignature } from './story-types';

const firstDay = '2023-06-14';
/** The story ends here; a server whose clock stands earlier could not go on from it. */
export const lastInstant = instantAt('2026-11-21', '18:00');

type People = Record<DemoRole, PersonRow>;
type Telling = { at: string; tell: () => Promise<unknown> };

export const isSeeded = async (): Promise<boolean> => (await people.find({ email: demoAccounts[0].email })) !== null;

/** Tells the demo's three years through the services the app uses, one event after another, under an injected clock. */
export async function seedDemo(report: (done: number, of: number) => void): Promise<void> {
  if (Date.now() < Date.parse(lastInstant)) {
    throw new Error(
      `This machine's clock stands before the demo's last day, ${lastInstant.slice(0, 10)}. Set it right.`,
    );
  }
  const cast = await atTime(new Date(instantAt('2023-06-10', '19:00')), makePeople);
  const shop = await atTime(new Date(instantAt('2023-06-12', '09:00')), () => makeShop(cast));
  const sorrel = await makeSorrel(cast);
  const wren = await makeWren(cast, sorrel);

  const countersignings = sorrelCountersignatures.map((signature): Telling => ({
    at: instantAt(signature.on, signature.time),
    tell: () => tellCountersignature({ cast, shop, garage: sorrel, signature, seqOf }),
  }));
  const seqByDay = new Map<string, number>();
  const seqOf = (day: string) => seqByDay.get(day) ?? 0;
  const events: Telling[] = [
    ...sorrelPurchases.map((purchase) => ({
      at: instantAt(purchase.on, purchase.time),
      tell: () => tellPurchase(sorrel, purchase),
    })),
    ...wrenPurchases.map((purchase) => ({
      at: instantAt(purchase.on, purchase.time),
      tell: () => tellPurchase(wren, purchase),
    })),
    ...[...sorrelWorks, wrongMachineWork].map((work) => ({
      at: instantAt(work.sealed?.on ?? work.on, work.sealed?.time ?? work.to),
      tell: async () => void seqByDay.set(work.on, (await tellWork(sorrel, work)) ?? 0),
    })),
    ...wrenWorks.map((work) => ({
      at: instantAt(work.sealed?.on ?? work.on, work.sealed?.time ?? work.to),
      tell: () => tellWork(wren, work),
    })),
    ...sorrelStrikes.map((strike) => ({
      at: instantAt(strike.on, strike.time),
      tell: () => tellStrike(sorrel, strike, seqOf(strike.of)),
    })),
    ...sorrelAddenda.map((addendum) => ({
      at: instantAt(addendum.on, addendum.time),
      tell: () => tellAddendum(sorrel, addendum, seqOf(addendum.of)),
    })),
    ...countersignings,
    { at: instantAt('2026-11-19', '20:00'), tell: () => inviteAgain(cast, sorrel, seqOf('2026-08-15')) },
    {
      at: instantAt(openGearboxWork.on, openGearboxWork.to),
      tell: () => tellWork(sorrel, openGearboxWork),
    },
  ].sort((a, b) => (a.at < b.at ? -1 : 1));
  for (const [i, event] of events.entries()) {
    await event.tell();
    report(i + 1, events.length);
  }
}

async function makePeople(): Promise<People> {
  const made: Partial<People> = {};
  for (const { email, name, password, role } of demoAccounts) {
    made[role] = await buildPerson({ email, name, password, isSteward: role === 'steward', timeZone: zone });
  }
  return made as People;
}

async function makeShop(cast: People): Promise<string> {
  const input = { name: 'Halyard Cycle Works', address: '3 Ropewalk, Millbrook', registration: 'MB-1188' };
  const shop = await createShop({ person: cast.shop, input });
  await confirmShop({ person: cast.steward, shopId: shop.id });
  return shop.id;
}

async function makeSorrel(cast: People): Promise<Garage> {
  const machine = randomUUID();
  await atTime(new Date(instantAt(firstDay, '18:30')), async () => {
    await createMachine({
      person: cast.rider,
      input: machineInput.parse({
        machine, make: 'Corvane', model: 'Sorrel 1800', modelYear: '2022', kind: 'big V-twin tourer', vin: 'AAACRVSR3NA000417',
        engineNumber: 'SR18-004417', distanceUnit: '[mi_i]', timeZone: zone, firstUseOn: firstDay, firstUseOdometer: '4', why: 'new',
        warrantyTitle: 'Corvane extended warranty', warrantyKind: 'extended', warrantyStartsOn: firstDay, warrantyMonths: '48', warrantyDistance: '30000', warrantyUnit: '[mi_i]',
      }), // prettier-ignore
    });
    await addHelper(cast, machine);
  });
  const [shelf] = await shelves.all({ createdBy: cast.rider.id });
  if (shelf === undefined) throw new Error('The rider has no shelf.');
  return { owner: cast.rider, helper: cast.helper, machine, shelf: shelf.id };
}

async function makeWren(cast: People, sorrel: Garage): Promise<Garage> {
  const machine = randomUUID();
  await atTime(new Date(instantAt('2024-04-20', '12:00')), () =>
    createMachine({
      person: cast.rider,
      input: machineInput.parse({
        machine, make: 'Corvane', model: 'Wren 300', modelYear: '2024', kind: 'dual-sport motorcycle', vin: 'AAACRVWR0RA001203',
        distanceUnit: '[mi_i]', timeZone: zone, firstUseOn: '2024-04-20', firstUseOdometer: '2', why: 'new',
      }), // prettier-ignore
    }),
  );
  return { ...sorrel, machine };
}

async function addHelper(cast: People, machine: string): Promise<void> {
  const since = instantAt(firstDay, '18:40');
  await write((transaction) =>
    relations.insert(
      {
        id: randomUUID(),
        personId: cast.helper.id,
        subjectKind: 'machine',
        subjectId: machine,
        relation: 'helper',
        since,
        until: null,
      },
      { transaction },
    ),
  );
}

async function tellCountersignature(options: {
  cast: People;
  shop: string;
  garage: Garage;
  signature: StoryCountersignature;
  seqOf: (day: string) => number;
}): Promise<void> {
  const { cast, shop, garage, signature, seqOf } = options;
  const at = instantAt(signature.on, signature.time);
  await atTime(minutesAfter(at, -30), () =>
    inviteCountersigner({
      person: cast.rider,
      machineId: garage.machine,
      seq: seqOf(signature.of),
      input: { email: cast.shop.email, message: '' },
    }),
  );
  const [invitation] = await invitationsToEmail(cast.shop.email);
  if (invitation === undefined) throw new Error('No invitation was sent.');
  const { capacity, statement } = signature;
  await atTime(new Date(at), () =>
    answerInvitation({
      person: cast.shop,
      invitationId: invitation.id,
      shopId: shop,
      cameByAddress: false,
      input: { answer: 'countersign', capacity, statement },
    }),
  );
}

async function inviteAgain(cast: People, garage: Garage, seq: number): Promise<void> {
  if ((await findLogOf(garage.machine)) === null) throw new Error('The machine has no record.');
  await atTime(
    new Date(instantAt('2026-11-19', '20:00')),
    () =>
    inviteCountersigner({
      person: cast.rider, machineId: garage.machine, seq,
      input: { email: cast.shop.email, message: 'You saw it on the stand in August; would you sign for the levels and the plugs?' },
    }), // prettier-ignore
  );
}

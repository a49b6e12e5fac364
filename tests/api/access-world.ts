import { randomUUID } from 'node:crypto';
import { drafts, files, uploads, type DraftRow } from '@/db/models/drafts';
import { shops } from '@/db/models/machines';
import { packets } from '@/db/models/proof';
import { relations, type PersonRow, type RelationRow } from '@/db/models/people';
import { shelvesOf } from '@/db/queries/shelves';
import { blobStore } from '@/lib/ports/blob-store';
import { now } from '@/lib/ports/clock';
import { mailNames } from '@/lib/ports/mail-folder';
import { sendMail } from '@/lib/ports/mail';
import { createMachine } from '@/lib/services/create-machine';
import { machineInput } from '@/lib/services/machine-input';
import { makePerson } from '@/tests/setup/test-database';
import type { Kind } from './access-list';

/** One machine with its owner and helper, their shelf, a shop with its technician, and people who have none of it. */
export interface AccessWorld {
  machine: string;
  shelf: string;
  shop: string;
  /** Open drafts of the machine and the shelf; `discarded` is the one the test may throw away. */
  worksheet: string;
  receipt: string;
  discarded: string;
  /** SHA-256 of a picture on the worksheet. */
  plate: string;
  log: string;
  /** A packet that could not be built, so that nothing waits for it. */
  packet: string;
  /** File name of a mail. */
  mail: string;
  people: Record<Exclude<Kind, 'anonymous'>, PersonRow>;
}

export async function buildAccessWorld(): Promise<AccessWorld> {
  const people = {
    stranger: await makePerson({ name: 'A stranger' }),
    helper: await makePerson({ name: 'Joost' }),
    owner: await makePerson({ name: 'Imke Vandersloot' }),
    technician: await makePerson({ name: 'Teodora Lindqvist' }),
    steward: await makePerson({ name: 'Steward', isSteward: true }),
  };
  const { machine, log } = await createMachine({ person: people.owner, input: sorrel() });
  const shelf = (await shelvesOf(people.owner.id))[0]!.id;
  const shop = randomUUID();
  const at = now().toISOString();
  await shops.insert({
    id: shop,
    name: 'Halyard Cycle Works',
    address: null,
    registration: null,
    confirmedBy: null,
    confirmedAt: null,
    createdBy: people.technician.id,
    createdAt: at,
  });
  // The stranger owns a machine too, so that being an owner somewhere opens nothing here.
  await createMachine({ person: people.stranger, input: sorrel() });
  await relate(people.helper, 'helper', 'machine', machine);
  await relate(people.helper, 'helper', 'shelf', shelf);
  await relate(people.technician, 'technician', 'shop', shop);

  const [worksheet, discarded] = [await draft('worksheet', machine), await draft('worksheet', machine)];
  const receipt = await draft('receipt', shelf);
  await sendMail({ to: people.owner.email, subject: 'A reminder', text: 'Engine oil is due.\n' });

  async function draft(kind: DraftRow['kind'], subjectId: string): Promise<string> {
    const id = randomUUID();
    const row = { id, kind, subjectId, createdBy: people.owner.id, createdAt: at, changedAt: at };
    await drafts.insert({ ...row, state: 'open', sealedLog: null, sealedSeq: null });
    return id;
  }

  return {
    machine,
    shelf,
    shop,
    worksheet,
    receipt,
    discarded,
    log,
    packet: await failedPacket(machine, people.owner.id),
    plate: await picture(worksheet, people.owner.id),
    mail: (await mailNames())[0]!,
    people,
  };
}

async function relate(
  person: PersonRow,
  relation: RelationRow['relation'],
  subjectKind: RelationRow['subjectKind'],
  subjectId: string,
): Promise<void> {
  const since = now().toISOString();
  await relations.insert({
    id: randomUUID(),
    personId: person.id,
    subjectKind,
    subjectId,
    relation,
    since,
    until: null,
  });
}

async function failedPacket(machineId: string, createdBy: string): Promise<string> {
  const id = randomUUID();
  const at = now().toISOString();
  await packets.insert({
    id,
    machineId,
    number: 'WM-TEST-0001',
    purpose: 'For the service desk',
    state: 'failed',
    stage: '',
    progress: 0,
    error: 'The disk was full.',
    createdBy,
    createdAt: at,
    finishedAt: at,
    fileSha256: null,
    bytes: null,
    pages: null,
    logSize: null,
    linkId: null,
  });
  return id;
}

/** The stored bytes need not be a picture here: only who gets them is asked. */
async function picture(draftId: string, personId: string): Promise<string> {
  const { sha256, bytes } = await blobStore.put(Buffer.from('a picture of a drain plug'));
  const at = now().toISOString();
  await files.insert({ sha256, bytes, mediaType: 'image/jpeg', createdAt: at });
  await uploads.insert({
    id: randomUUID(),
    draftId,
    personId,
    sha256,
    name: 'drain-plug.jpg',
    receivedAt: at,
    takenLocal: null,
    takenOffset: null,
    width: null,
    height: null,
    copySha256: sha256,
    copyRemoved: '[]',
    thumbSha256: sha256,
  });
  return sha256;
}

function sorrel() {
  return machineInput.parse({
    machine: randomUUID(),
    make: 'Corvane',
    model: 'Sorrel 1800',
    modelYear: '2022',
    kind: 'big V-twin tourer',
    vin: 'AAACRVSR3NA000417',
    distanceUnit: '[mi_i]',
    timeZone: 'UTC',
    firstUseOn: '2022-05-01',
    firstUseOdometer: '3',
    why: 'new',
    startsOn: '2022-05-01',
    startsOdometer: '3',
  });
}

import { randomUUID } from 'node:crypto';
import { mkdirSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { Readable } from 'node:stream';
import { drafts, files, uploads, type DraftRow } from '@/db/models/drafts';
import { shops } from '@/db/models/machines';
import { relations, type PersonRow, type RelationRow } from '@/db/models/people';
import { invitations, packets, passkeys } from '@/db/models/proof';
import { findEntry } from '@/db/queries/entries';
import { shelvesOf } from '@/db/queries/shelves';
import { newSecretAddress } from '@/lib/auth/secret-address';
import { blobStore } from '@/lib/ports/blob-store';
import { now } from '@/lib/ports/clock';
import { mailNames } from '@/lib/ports/mail-folder';
import { sendMail } from '@/lib/ports/mail';
import { appendEntry } from '@/lib/services/append-entry';
import { packetFile } from '@/lib/services/build-packet';
import { keepersOfMachine } from '@/db/queries/checkpoint-keepers';
import { askCheckpointKeeper } from '@/lib/services/ask-checkpoint-keeper';
import { keeperToken } from '@/lib/services/keeper-address';
import { createMachine } from '@/lib/services/create-machine';
import { createViewingLink } from '@/lib/services/create-viewing-link';
import { exportRecord } from '@/lib/services/export-record';
import { keepImport } from '@/lib/services/keep-import';
import { machineInput } from '@/lib/services/machine-input';
import { keepChallenge } from '@/lib/services/passkey-challenge';
import { countersignatureBody } from '@/tests/setup/sealed-record';
import { receiveImport } from '@/lib/services/receive-import';
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
  /** An open addendum to the opening, with nothing in it. */
  addendum: string;
  discarded: string;
  /** SHA-256 of a picture on the worksheet. */
  plate: string;
  log: string;
  /** A packet that could not be built, so that nothing waits for it. */
  packet: string;
  /** A record from elsewhere that the owner keeps, and one that waits for a decision. */
  import: string;
  stagedImport: string;
  /** File name of a mail. */
  mail: string;
  /** Two viewing links of the machine; everybody's browser came by the first. `spare` is the one the test may revoke. */
  link: string;
  spareLink: string;
  linkToken: string;
  /** An invitation to the opening of the machine's record; everybody's browser came by its address. */
  invitation: string;
  invitationToken: string;
  /** The owner's own key, which the test may remove; what the owner and the technician were asked to sign. */
  passkey: string;
  challenge: string;
  shopChallenge: string;
  /** An address that was asked to keep checkpoints of the machine's record. */
  keeper: string;
  keeperToken: string;
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
  const addendum = await draft('addendum', machine, 0);
  await sendMail({ to: people.owner.email, subject: 'A reminder', text: 'Engine oil is due.\n' });

  async function draft(kind: DraftRow['kind'], subjectId: string, refersToSeq: number | null = null): Promise<string> {
    const id = randomUUID();
    const row = { id, kind, subjectId, createdBy: people.owner.id, createdAt: at, changedAt: at };
    await drafts.insert({ ...row, state: 'open', sealedLog: null, sealedSeq: null, refersToSeq });
    return id;
  }

  const plate = await picture(worksheet, people.owner.id);
  const shared = { machineId: machine, by: people.owner.id, expiresAt: null };
  const link = await createViewingLink({ ...shared, label: 'A reader' });
  const spare = await createViewingLink({ ...shared, label: 'Another reader' });
  const invitation = await invite({ machine, log, owner: people.owner, email: people.technician.email });
  await sealPlate({ log, owner: people.owner, sha256: plate });
  await readyPacket(machine, people.owner.id);
  const brought = await bringIn({ machine, owner: people.owner });

  const asked = { log, refersTo: { seq: 0, leafHash: (await findEntry(log, 0))!.leafHash } };
  return {
    passkey: await ownKey(people.owner),
    challenge: await keepChallenge({
      personId: people.owner.id,
      challenge: 'AAAA',
      purpose: { for: 'signature', machine, ...asked },
      minutes: 60,
    }),
    shopChallenge: await keepChallenge({
      personId: people.technician.id,
      challenge: 'AAAA',
      purpose: { for: 'countersignature', invitation: invitation.id, shop, ...asked, body: countersignatureBody },
      minutes: 60,
    }),
    machine,
    shelf,
    shop,
    worksheet,
    receipt,
    addendum,
    discarded,
    log,
    packet: await failedPacket(machine, people.owner.id),
    plate,
    ...brought,
    mail: (await mailNames())[0]!,
    link: link.id,
    spareLink: spare.id,
    linkToken: link.token,
    invitation: invitation.id,
    invitationToken: invitation.token,
    ...(await askKeeper(machine, people.owner)),
    people,
  };
}

async function askKeeper(machineId: string, owner: PersonRow): Promise<{ keeper: string; keeperToken: string }> {
  await askCheckpointKeeper({ person: owner, machineId, input: { email: 'asked@post.example' } });
  const [keeper] = await keepersOfMachine(machineId);
  return { keeper: keeper!.id, keeperToken: keeperToken(keeper!.id).token };
}

/** Made for another host, so that no page offers to sign with it. */
async function ownKey(person: PersonRow): Promise<string> {
  const id = randomUUID();
  await passkeys.insert({
    id,
    personId: person.id,
    credentialId: 'AAAA',
    publicKey: 'AAAA',
    coseKey: 'AAAA',
    signCount: 0,
    rpId: 'records.old.example',
    name: 'Phone',
    transports: '[]',
    createdAt: now().toISOString(),
    lastUsedAt: null,
    revokedAt: null,
  });
  return id;
}

/** The owner's own export, sent twice: kept the first time, waiting the second. */
async function bringIn({ machine, owner }: { machine: string; owner: PersonRow }) {
  const { body } = await exportRecord({ person: owner, machineId: machine, files: 'originals' });
  const pieces: Uint8Array[] = [];
  for await (const piece of body) pieces.push(piece);
  const send = () => receiveImport({ person: owner, fileName: 'export.zip', body: Readable.from(pieces) });
  const kept = await keepImport({ person: owner, id: (await send()).id });
  return { import: kept.id, stagedImport: (await send()).id };
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

async function invite(options: { machine: string; log: string; owner: PersonRow; email: string }) {
  const { token, tokenHash } = newSecretAddress();
  const id = randomUUID();
  await invitations.insert({
    id,
    logId: options.log,
    seq: 0,
    machineId: options.machine,
    email: options.email,
    tokenHash,
    invitedBy: options.owner.id,
    message: '',
    createdAt: now().toISOString(),
    expiresAt: '2099-01-01T00:00:00.000Z',
    openedAt: null,
    remindedAt: null,
    withdrawnAt: null,
    answeredAt: null,
    answeredBy: null,
    shopId: null,
    outcome: null,
    declineReason: null,
    answerSeq: null,
  });
  return { id, token };
}

/** Readers get only what an opened part names, so the picture stands on an addendum to the opening. */
async function sealPlate({ log, owner, sha256 }: { log: string; owner: PersonRow; sha256: string }) {
  const opening = await findEntry(log, 0);
  const file = { sha256, bytes: 25, mediaType: 'image/jpeg' };
  await appendEntry({
    log,
    kind: 'addendum',
    by: owner.id,
    idempotencyKey: randomUUID(),
    refersTo: { seq: 0, leafHash: opening!.leafHash },
    parts: async () => ({
      author: { person: owner.id, name: owner.name, role: 'owner' },
      body: { text: 'The drain plug, photographed later.' },
      attachments: [
        { ...file, role: 'part', receivedAt: now().toISOString(), caption: '', copy: { ...file, removed: [] } },
      ],
    }),
  });
}

/** A packet as its row says; what the file holds is not asked here. */
async function readyPacket(machineId: string, createdBy: string): Promise<void> {
  const number = 'WM-TEST-2345';
  mkdirSync(path.dirname(packetFile(number)), { recursive: true });
  writeFileSync(packetFile(number), 'a packet');
  const at = now().toISOString();
  await packets.insert({
    id: randomUUID(),
    machineId,
    number,
    purpose: '',
    state: 'ready',
    stage: 'Ready',
    progress: 100,
    error: null,
    createdBy,
    createdAt: at,
    finishedAt: at,
    fileSha256: null,
    bytes: 8,
    pages: 1,
    logSize: 1,
    linkId: null,
    scope: null,
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
    scope: null,
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

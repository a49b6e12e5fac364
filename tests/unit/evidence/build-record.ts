import { ed25519 } from '@noble/curves/ed25519.js';
import { bundleText, signBundle } from '@/lib/evidence/bundle';
import { utf8 } from '@/lib/evidence/bytes';
import { checkpointText, type NoteSigner, signNote, verifierKey } from '@/lib/evidence/checkpoint';
import { newSalt } from '@/lib/evidence/disclosure';
import type { Attachment, Bundle, BundleFile, BundleLog, EntryKind, PartName, Reference } from '@/lib/evidence/format';
import { sha256, sha256Hex } from '@/lib/evidence/hash';
import { buildLeaf, type BuiltLeaf } from '@/lib/evidence/leaf';
import { CompactTree } from '@/lib/evidence/merkle';

export const origin = 'records.garage.example';
export const machineLog = '6f1c2a34-0000-4000-8000-000000000001';
export const shelfLog = '6f1c2a34-0000-4000-8000-000000000002';

/** A signer whose seed is a fixed byte: the same key in every run. */
export function signerOf(byte: number, name = origin): NoteSigner {
  return { name, privateKeySeed: new Uint8Array(32).fill(byte) };
}
export function keyOf(signer: NoteSigner): string {
  return verifierKey(signer.name, ed25519.getPublicKey(signer.privateKeySeed));
}
export const installation = signerOf(1);
export const attacker = signerOf(2);

let salts = 0;
/** Salts need only differ here. */
export function nextSalt(): string {
  salts += 1;
  return newSalt(sha256(utf8(`salt ${salts}`)).slice(0, 16));
}

export interface LineInput {
  kind: EntryKind;
  sealedAt: string;
  refersTo?: Reference | null;
  parts: Partial<Record<PartName, unknown>>;
}

/** Appends lines to a log and seals each, as an installation does. */
export class LogBuilder {
  readonly built: BuiltLeaf[] = [];
  readonly seals: string[] = [];
  readonly #tree = new CompactTree();

  constructor(
    readonly id: string,
    readonly subject: 'machine' | 'shelf',
    readonly signer: NoteSigner = installation,
  ) {}

  append(line: LineInput): Reference {
    const seq = this.built.length;
    const leaf = buildLeaf({
      log: this.id,
      seq,
      previous: this.built.at(-1)?.hash ?? null,
      kind: line.kind,
      sealedAt: line.sealedAt,
      refersTo: line.refersTo ?? null,
      parts: Object.entries(line.parts).map(([name, value]) => ({ name: name as PartName, value, salt: nextSalt() })),
    });
    this.built.push(leaf);
    this.#tree.append(leaf.hash);
    const text = checkpointText({ origin, log: this.id, size: seq + 1, root: this.#tree.root });
    this.seals.push(signNote(text, this.signer));
    return { seq, leafHash: leaf.hash };
  }

  /** The same log up to here, to go on differently. */
  fork(): LogBuilder {
    const other = new LogBuilder(this.id, this.subject, this.signer);
    other.built.push(...this.built);
    other.seals.push(...this.seals);
    for (const { hash } of this.built) other.#tree.append(hash);
    return other;
  }

  /** `opens` says which parts are opened; all are by default. */
  toLog(opens: (seq: number, part: PartName) => boolean = () => true): BundleLog {
    return {
      id: this.id,
      subject: this.subject,
      origin,
      checkpoint: this.seals.at(-1) ?? '',
      entries: this.built.map((leaf, seq) => ({
        leaf: leaf.text,
        parts: leaf.disclosures.filter(({ name }) => opens(seq, name)).map(({ text }) => text),
        seal: { checkpoint: this.seals[seq] ?? '', tokens: [] },
      })),
    };
  }
}

export const receiptBytes = utf8('a picture of a receipt');
export const receipt: Attachment = {
  sha256: sha256Hex(receiptBytes),
  bytes: receiptBytes.length,
  mediaType: 'image/jpeg',
  role: 'receipt-front',
  receivedAt: '2026-03-01T09:00:00.000Z',
  caption: 'Receipt, front',
};
export const oilBytes = utf8('a picture of an oil filter');
export const oil: Attachment = { ...receipt, sha256: sha256Hex(oilBytes), bytes: oilBytes.length, role: 'as-left' };

export const author = { person: 'c0ffee00-0000-4000-8000-000000000003', name: 'Imke Vandersloot', role: 'owner' };

export interface TestRecord {
  machine: LogBuilder;
  shelf: LogBuilder;
  purchase: Reference;
  service: Reference;
}

/** A machine with terms, a service that drew oil from the shelf, and a strike; a shelf with one purchase. */
export function buildRecord(changeDraw: (purchase: Reference) => Record<string, unknown> = () => ({})): TestRecord {
  const shelf = new LogBuilder(shelfLog, 'shelf');
  shelf.append({ kind: 'opening', sealedAt: '2026-01-01T08:00:00.000Z', parts: { author, body: { name: 'Shelf' } } });
  const purchase = shelf.append({
    kind: 'purchase',
    sealedAt: '2026-03-01T09:00:05.000Z',
    parts: {
      author,
      attachments: [receipt],
      body: {
        boughtOn: { date: '2026-03-01', zone: 'Europe/Berlin' },
        lines: [
          {
            line: 1,
            product: 'Fernhill Twin 20W-50',
            kind: 'fluid',
            containers: 5,
            containerSize: { amount: '1', unit: '[qt_us]' },
          },
        ],
      },
      prices: { currency: 'EUR', total: '6495', lines: [{ line: 1, price: '6495' }] },
    },
  });
  const machine = new LogBuilder(machineLog, 'machine');
  const opening = {
    make: 'Corvane', model: 'Sorrel 1800', kindOfMachine: 'tourer', recordStarts: { on: '2026-01-01', why: 'new' },
  }; // prettier-ignore
  machine.append({ kind: 'opening', sealedAt: '2026-01-01T08:01:00.000Z', parts: { author, body: opening } });
  machine.append({
    kind: 'terms',
    sealedAt: '2026-01-01T08:02:00.000Z',
    parts: { author, body: { schedule: [], fluidPoints: [], fasteners: [], parts: [], warranty: [] } },
  });
  const draw = {
    purchase: { log: shelfLog, ...purchase }, line: 1, product: 'Fernhill Twin 20W-50', boughtOn: '2026-03-01', amount: '4.25',
    unit: '[qt_us]', balanceBefore: { amount: '5', unit: '[qt_us]' }, balanceAfter: { amount: '0.75', unit: '[qt_us]' },
    ...changeDraw(purchase),
  }; // prettier-ignore
  const service = machine.append({
    kind: 'service',
    sealedAt: '2026-04-18T23:32:05.120Z',
    parts: {
      author,
      attachments: [oil],
      body: {
        termsSeq: 1, recorded: 'at-the-time', title: 'Engine oil', performedBy: [], checks: [], statement: 'I did this work.',
        finishedAt: { date: '2026-04-18', time: '19:30', zone: 'America/New_York' },
        odometer: { value: '12034', unit: '[mi_i]', instrument: 0 },
        tasks: [{ key: 'engine-oil', title: 'Engine oil', fills: [{ point: 'engine', draws: [draw] }] }],
      },
    },
  }); // prettier-ignore
  machine.append({
    kind: 'strike',
    sealedAt: '2026-04-19T06:00:00.000Z',
    refersTo: service,
    parts: { author, body: { reason: 'Wrong odometer figure.' } },
  });
  return { machine, shelf, purchase, service };
}

export const listedReceipt: BundleFile = {
  sha256: receipt.sha256, name: 'receipt.jpg', mediaType: 'image/jpeg', bytes: receipt.bytes, included: true, derivedFrom: null,
}; // prettier-ignore
export const listedOil: BundleFile = { ...listedReceipt, sha256: oil.sha256, name: 'oil.jpg', bytes: oil.bytes };
export const givenFiles = [
  { name: 'receipt.jpg', bytes: receiptBytes },
  { name: 'oil.jpg', bytes: oilBytes },
];

/** The unsigned bundle of a record; `change` may replace any member. */
export function unsignedBundle(record: TestRecord, change: Partial<Bundle> = {}): Omit<Bundle, 'signature'> {
  return {
    format: 'witnessmark/bundle/1',
    madeAt: '2026-05-01T12:00:00.000Z',
    purpose: 'Warranty claim',
    number: 'WM-0001',
    verifierKeys: [keyOf(installation)],
    packetCertificate: null,
    logs: [record.machine.toLog(), record.shelf.toLog()],
    files: [listedReceipt, listedOil],
    ...change,
  };
}
/** The text of a record, signed by whoever is named. */
export function signedText(unsigned: Omit<Bundle, 'signature'>, signer: NoteSigner = installation): string {
  return bundleText(signBundle(unsigned, signer));
}

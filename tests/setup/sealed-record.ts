import { randomUUID } from 'node:crypto';
import type { Attachment, CountersignatureBody, OpeningBody, PurchaseBody, TermsBody } from '@/lib/evidence/format';
import { appendEntry } from '@/lib/services/append-entry';
import { openLog } from '@/lib/services/open-log';
import type { Sealed } from '@/lib/services/seal-next';
import { makePerson } from './test-database';

const zone = 'America/Denver';
export const receiptFront: Attachment = {
  sha256: 'a'.repeat(64),
  bytes: 48_213,
  mediaType: 'image/jpeg',
  role: 'receipt-front',
  receivedAt: '2026-04-02T17:04:11.000Z',
  caption: '',
  copy: { sha256: 'b'.repeat(64), bytes: 40_112, mediaType: 'image/jpeg', removed: ['location'] },
};
export const odometerPhoto: Attachment = {
  sha256: 'c'.repeat(64),
  bytes: 61_000,
  mediaType: 'image/heic',
  role: 'odometer',
  receivedAt: '2026-04-18T22:50:00.000Z',
  caption: 'Before the ride',
};

/**
 * A small true-to-form record for tests: a shelf with a purchase that is drawn from and one that is not, and a machine
 * with terms, a service and nothing else yet. Everything is sealed by the same rider.
 */
export async function sealRecord() {
  const rider = await makePerson();
  const author = { person: rider.id, name: rider.name, role: 'owner' as const };
  const [machineId, shelfId] = [randomUUID(), randomUUID()];
  const seal = (log: string, kind: Parameters<typeof appendEntry>[0]['kind'], parts: object, refersTo?: Sealed) =>
    appendEntry({
      log,
      kind,
      by: rider.id,
      idempotencyKey: randomUUID(),
      refersTo: refersTo === undefined ? null : { seq: refersTo.seq, leafHash: refersTo.leafHash },
      parts: async () => ({ author, ...parts }),
    });

  const shelf = await openLog({
    subject: 'shelf',
    subjectId: shelfId,
    by: rider.id,
    parts: async () => ({ author, body: { name: 'Imke’s shelf' } }),
  });
  const purchaseBody = (product: string): PurchaseBody => ({
    boughtOn: { date: '2026-04-02', time: '10:58', zone },
    lines: [
      {
        line: 1,
        product,
        kind: 'fluid',
        grade: '20W-50',
        containers: 6,
        containerSize: { amount: '1', unit: '[qt_us]' },
      },
    ],
  });
  const unused = await seal(shelf.log, 'purchase', {
    body: purchaseBody('Tarn Fork 10'),
    supplier: { name: 'Brandywell Powersports' },
    prices: { currency: 'USD', total: '1999', lines: [] },
  });
  const purchase = await seal(shelf.log, 'purchase', {
    body: purchaseBody('Fernhill V-Twin 20W-50'),
    supplier: { name: 'Brandywell Powersports' },
    prices: { currency: 'USD', total: '7194', lines: [{ line: 1, price: '7194' }] },
    attachments: [receiptFront],
  });

  const openingBody: OpeningBody = {
    make: 'Corvane',
    model: 'Sorrel 1800',
    modelYear: '2022',
    kindOfMachine: 'motorcycle',
    recordStarts: { on: '2022-05-01', why: 'new' },
  };
  const machine = await openLog({
    subject: 'machine',
    subjectId: machineId,
    by: rider.id,
    parts: async () => ({ author, body: openingBody, identity: { vin: 'AAACRVSR3NA000417' } }),
  });
  const termsBody: TermsBody = { schedule: [], fluidPoints: [], fasteners: [], parts: [], warranty: [] };
  const terms = await seal(machine.log, 'terms', { body: termsBody });
  const draw = {
    purchase: { log: shelf.log, seq: purchase.seq, leafHash: purchase.leafHash },
    line: 1,
    product: 'Fernhill V-Twin 20W-50',
    boughtOn: '2026-04-02',
    amount: '4.25',
    unit: '[qt_us]',
    balanceBefore: { amount: '6', unit: '[qt_us]' },
    balanceAfter: { amount: '1.75', unit: '[qt_us]' },
  };
  const service = await seal(machine.log, 'service', {
    body: {
      termsSeq: terms.seq,
      recorded: 'at-the-time',
      finishedAt: { date: '2026-04-18', time: '16:40', zone },
      odometer: { value: '18204', unit: '[mi_i]', instrument: 0 },
      performedBy: [{ person: rider.id, capacity: 'owner' }],
      title: 'Engine oil and filter',
      tasks: [
        {
          key: 'engine-oil',
          title: 'Engine oil',
          action: 'replace',
          steps: [],
          inspections: [],
          fills: [
            {
              point: 'engine',
              pointTitle: 'Engine',
              fillKind: 'wet',
              product: 'Fernhill V-Twin 20W-50',
              amounts: [{ amount: '4.25', unit: '[qt_us]', step: 'first' }],
              draws: [draw],
            },
          ],
          torques: [],
          parts: [],
          levelChecks: [],
        },
      ],
      checks: [],
      statement: 'I did this work as written.',
    },
    attachments: [odometerPhoto],
    notes: { text: 'Drain plug washer new.' },
  });
  return { rider, machineId, shelfId, shelf, unused, purchase, machine, terms, service, seal };
}

export const countersignatureBody: CountersignatureBody = {
  capacity: 'inspected',
  statement: 'We looked at the finished work.',
  shop: { name: 'Halyard Cycle Works', accountSince: '2025-01-01T00:00:00.000Z', confirmedBy: null },
  invitedBy: 'Imke Vandersloot',
};

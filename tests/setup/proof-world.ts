import { randomUUID } from 'node:crypto';
import { Readable } from 'node:stream';
import sharp from 'sharp';
import type { PersonRow } from '@/db/models/people';
import { confirmReceipt } from '@/lib/services/confirm-receipt';
import { createShop } from '@/lib/services/create-shop';
import { receiveUpload } from '@/lib/services/receive-upload';
import { reviewWorksheet } from '@/lib/services/review-worksheet';
import { sealWorksheet } from '@/lib/services/seal-worksheet';
import { draftWith, oilChange, receiptFields, riderWithMachine, typeInto } from '@/tests/db/services/garage-story';
import { makePerson } from './test-database';

/** A small PDF that opens; what it shows is not asked. */
const paper = Buffer.from('%PDF-1.4\n1 0 obj<</Type/Catalog>>endobj\ntrailer<</Root 1 0 R>>\n%%EOF\n');

/**
 * A machine with one sealed service that drew from a sealed receipt, both photographed, the receipt as a PDF too; a
 * picture on a worksheet that nobody sealed; and a shop with its technician.
 */
export async function buildProofWorld() {
  const { person, machine, shelf } = await riderWithMachine();
  const receipt = await draftWith({ person, kind: 'receipt', subject: shelf, fields: receiptFields });
  const receiptPdf = await attach(person, receipt, 'receipt-page', paper);
  const purchase = await confirmReceipt({ person, draftId: receipt });
  const draftId = await draftWith({ person, kind: 'worksheet', subject: machine, fields: oilChange(purchase) });
  const odometer = await attach(person, draftId, 'odometer', await picture('#334155'));
  const { composed } = await reviewWorksheet({ person, draftId });
  const { seq } = await sealWorksheet({ person, draftId, reviewed: composed!.fingerprint });
  const open = await draftWith({ person, kind: 'worksheet', subject: machine, fields: oilChange(purchase) });
  const unsealed = await attach(person, open, 'as-found', await picture('#7f1d1d'));

  const technician = await makePerson({ name: 'Teodora Lindqvist', email: 'teodora@halyard.example' });
  const shop = await createShop({
    person: technician,
    input: { name: 'Halyard Cycle Works', address: '1 Quay Street, Halyard', registration: '' },
  });
  return {
    person,
    machine,
    shelf,
    purchase: purchase.seq,
    seq,
    odometer,
    receiptPdf,
    unsealed,
    technician,
    shop: shop.id,
  };
}

async function picture(background: string): Promise<Buffer> {
  return sharp({ create: { width: 320, height: 240, channels: 3, background } })
    .jpeg()
    .toBuffer();
}

/** Uploads a file to a draft and gives it its role. Returns the SHA-256 of what was sent. */
async function attach(person: PersonRow, draft: string, role: string, bytes: Buffer): Promise<string> {
  const id = randomUUID();
  const name = role.startsWith('receipt') ? `${role}.pdf` : `${role}.jpg`;
  const { sha256 } = await receiveUpload({ person, query: { id, draft, name }, body: Readable.from([bytes]) });
  await typeInto({ person, draft, fields: { [`photos/${id}/role`]: role } });
  return sha256;
}

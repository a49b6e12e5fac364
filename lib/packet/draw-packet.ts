import 'server-only';
import type { FileHandle } from 'node:fs/promises';
import { areTimesInjected, purchasesOf, type PacketContent } from './content';
import type { AttachedFile } from './layer/attachments';
import { Layer } from './layer/layer';
import { drawContents } from './pages/contents';
import { drawCover } from './pages/cover';
import { drawEntry } from './pages/entry';
import { drawLedger } from './pages/ledger';
import { drawReceipt } from './pages/receipt';
import { drawTerms } from './pages/terms';
import { drawVerification } from './pages/verification';
import { edges, Sheet, types } from './sheet/sheet';
import { summarise } from './summary';

export interface DrawnPacket {
  pages: number;
  bytes: number;
  sha256: string;
  /** Characters no face has; each was printed as a crossed box. */
  missing: string[];
}
/** `done` runs from 0 to 1 within a stage. */
export type Progress = (stage: 'drawing' | 'writing', done: number) => Promise<void>;

/** Draws the whole packet into an open file: cover, contents, terms, ledger, entries, receipts, how to check it. */
export async function drawPacket(content: PacketContent, file: FileHandle, progress: Progress): Promise<DrawnPacket> {
  const { record, number, madeAt, recordJson, signer } = content;
  const { identity, machine } = record;
  const notice = areTimesInjected(record) ? 'demo, times injected' : undefined;
  const vin = identity?.vin ?? identity?.frameNumber;
  const layer = new Layer();
  const sheet = new Sheet(layer, {
    left: vin === undefined ? `${machine.make} ${machine.model}`.slice(0, 60) : `VIN ${vin}`,
    centre: `Packet ${number}`,
    notice,
  });

  drawCover(sheet, content, summarise(content));
  drawContents(sheet, content);
  drawTerms(sheet, content);
  drawLedger(sheet, content);
  for (const [i, entry] of record.entries.entries()) {
    if (i === 0) beginPart(sheet, 'Entries', 'entries');
    drawEntry(sheet, entry, content);
    await progress('drawing', (i + 1) / record.entries.length);
  }
  const purchases = purchasesOf(record);
  purchases.forEach((purchase, i) => {
    if (i === 0) beginPart(sheet, 'Receipts', 'receipts', receiptsNote(record));
    drawReceipt(sheet, purchase, content);
  });
  drawVerification(sheet, content);

  const name = [machine.modelYear, machine.make, machine.model].filter(Boolean).join(' ');
  const written = await layer.finish(
    file,
    {
      title: `Service record of ${name}, packet ${number}`,
      subject: content.purpose === '' ? 'Service record' : content.purpose,
      madeAt,
      identity: `${number}\n${recordJson}`,
    },
    attachmentsOf(content),
    { reason: `Packet ${number}`, madeAt, sign: signer.sign },
    (done) => progress('writing', done),
  );
  return { pages: layer.pageCount, ...written, missing: [...layer.missing] };
}

function beginPart(sheet: Sheet, title: string, anchor: string, note?: string): void {
  sheet.newPage();
  sheet.anchor(anchor);
  sheet.layer.bookmark(title, 0, edges.top);
  sheet.paragraph(title, types.h1, { tag: 'H1' });
  if (note !== undefined) sheet.paragraph(note, types.small);
  sheet.gap(-10);
}

/** Numbers are missing from the row on purpose, and a reader is told why before asking. */
function receiptsNote({ shelves }: PacketContent['record']): string {
  const printed = shelves.reduce((sum, { purchases }) => sum + purchases.length, 0);
  const lines = shelves.reduce((sum, { log }) => sum + log.size, 0);
  return (
    `R and a number is the receipt’s line in the shelf’s log. Printed here: the ${printed} purchases that the opened ` +
    `entries draw from, of ${lines} lines of the shelf; the others are withheld, named and counted in record.json. ` +
    'A receipt shows that something was bought; that it went into this machine is the owner’s word.'
  );
}

function attachmentsOf({ files, recordJson, madeAt, number }: PacketContent): AttachedFile[] {
  const record: AttachedFile = {
    name: 'record.json',
    mediaType: 'application/json',
    description: `The whole record of packet ${number}, to be checked`,
    relationship: 'Data',
    changedAt: madeAt,
    content: new Uint8Array(Buffer.from(recordJson, 'utf8')),
  };
  const copies = [...files.values()].map(({ name, mediaType, source, sha256 }): AttachedFile => ({
    name,
    mediaType,
    description: `Shared copy, SHA-256 ${sha256}`,
    relationship: 'Supplement',
    changedAt: madeAt,
    content: source,
  }));
  return [record, ...copies];
}

import 'server-only';
import { paths } from '@/lib/paths';
import type { PacketContent } from '../content';
import { drawBoxes } from '../sheet/boxes';
import { type Sheet } from '../sheet/sheet';

const inFours = (hex: string) => hex.match(/.{4}/g)?.join(' ') ?? hex;

/** What the signature over the file covers, who made it, and what a PDF reader will say of it. */
export function drawPageSignature(sheet: Sheet, { signer, site }: PacketContent): void {
  sheet.heading('The signature on this file', { below: 80 });
  sheet.paragraph(
    'All of this file but the signature itself is signed: pages, plates and attached files. The signature was made with ' +
      'this installation’s packet certificate; its fingerprint below stands in record.json too, which the signing key ' +
      'above signs. The check with verify.mjs says whether file and signature belong together. If a time-stamp authority ' +
      'answered while the file was written, the signature carries its stamp.',
  );
  sheet.gap(3);
  drawBoxes(sheet, 1, [
    { label: 'Fingerprint of the packet certificate (SHA-256)', value: inFours(signer.certificate), kind: 'hash' },
  ]);
  sheet.gap(4);
  sheet.paragraph(
    'A PDF reader finds the same signature, and will call its maker an unknown identity unless you have it trust this ' +
      `installation’s packet root, ${site}${paths.api.packetRoot}. Anybody can make a certificate of any name, so ` +
      'compare the fingerprint. What counts is record.json.',
  );
}

import 'server-only';
import { createHash } from 'node:crypto';
import sharp from 'sharp';
import { PDFHexString, PDFName, PDFString, type PDFContext, type PDFRef } from 'pdf-lib';

export interface DocumentMetadata {
  title: string;
  subject: string;
  /** UTC instant. */
  madeAt: string;
  /** What the trailer's ID is made from: the same packet, the same ID. */
  identity: string;
}

const producer = 'Witnessmark';
const escaped = (text: string) => text.replace(/[<>&"']/g, (mark) => `&#${mark.charCodeAt(0)};`);

/** ISO 19005-3 (PDF/A-3b) is claimed here and nowhere else. */
function xmp({ title, subject, madeAt }: DocumentMetadata): string {
  const date = `${madeAt.slice(0, 19)}Z`;
  return [
    '<?xpacket begin="\ufeff" id="W5M0MpCehiHzreSzNTczkc9d"?>',
    '<x:xmpmeta xmlns:x="adobe:ns:meta/">',
    '<rdf:RDF xmlns:rdf="http://www.w3.org/1999/02/22-rdf-syntax-ns#">',
    '<rdf:Description rdf:about="" xmlns:dc="http://purl.org/dc/elements/1.1/" xmlns:xmp="http://ns.adobe.com/xap/1.0/"',
    ' xmlns:pdf="http://ns.adobe.com/pdf/1.3/" xmlns:pdfaid="http://www.aiim.org/pdfa/ns/id/">',
    '<dc:format>application/pdf</dc:format>',
    `<dc:title><rdf:Alt><rdf:li xml:lang="x-default">${escaped(title)}</rdf:li></rdf:Alt></dc:title>`,
    `<dc:description><rdf:Alt><rdf:li xml:lang="x-default">${escaped(subject)}</rdf:li></rdf:Alt></dc:description>`,
    '<dc:language><rdf:Bag><rdf:li>en</rdf:li></rdf:Bag></dc:language>',
    `<xmp:CreatorTool>${producer}</xmp:CreatorTool>`,
    `<xmp:CreateDate>${date}</xmp:CreateDate><xmp:ModifyDate>${date}</xmp:ModifyDate>`,
    `<pdf:Producer>${producer}</pdf:Producer>`,
    '<pdfaid:part>3</pdfaid:part><pdfaid:conformance>B</pdfaid:conformance>',
    '</rdf:Description></rdf:RDF></x:xmpmeta>',
    '<?xpacket end="w"?>',
  ].join('\n');
}

export const pdfDate = (instant: string) => `D:${instant.slice(0, 19).replace(/[-:T]/g, '')}Z`;

let profile: Promise<Uint8Array> | undefined;
async function makeProfile(): Promise<Uint8Array> {
  const pixel = sharp({ create: { width: 1, height: 1, channels: 3, background: '#fff' } });
  const { icc } = await sharp(await pixel.withIccProfile('srgb').png().toBuffer()).metadata();
  if (icc === undefined) throw new Error('The sRGB colour profile could not be made.');
  return new Uint8Array(icc);
}

/** Metadata stream, colour profile, information dictionary and trailer ID; returns what the catalog needs. */
export async function writeMetadata(
  context: PDFContext,
  metadata: DocumentMetadata,
): Promise<{ metadata: PDFRef; outputIntent: PDFRef }> {
  profile ??= makeProfile();
  const icc = context.register(context.flateStream(await profile, { N: 3 }));
  const outputIntent = context.register(
    context.obj({
      Type: 'OutputIntent',
      S: 'GTS_PDFA1',
      OutputConditionIdentifier: PDFString.of('sRGB IEC61966-2.1'),
      Info: PDFString.of('sRGB IEC61966-2.1'),
      DestOutputProfile: icc,
    }),
  );
  const stream = context.stream(new Uint8Array(Buffer.from(xmp(metadata), 'utf8')), {
    Type: 'Metadata',
    Subtype: 'XML',
  });
  const info = context.obj({});
  info.set(PDFName.of('Title'), PDFHexString.fromText(metadata.title));
  info.set(PDFName.of('Subject'), PDFHexString.fromText(metadata.subject));
  info.set(PDFName.of('Creator'), PDFString.of(producer));
  info.set(PDFName.of('Producer'), PDFString.of(producer));
  info.set(PDFName.of('CreationDate'), PDFString.of(pdfDate(metadata.madeAt)));
  info.set(PDFName.of('ModDate'), PDFString.of(pdfDate(metadata.madeAt)));
  context.trailerInfo.Info = context.register(info);
  const id = PDFHexString.of(createHash('sha256').update(metadata.identity).digest('hex').slice(0, 32));
  context.trailerInfo.ID = context.obj([id, id]);
  return { metadata: context.register(stream), outputIntent };
}

import 'server-only';
import { whatIsShown } from '@/lib/evidence/format';
import type { LogView } from '@/lib/services/record-view';
import type { PacketContent } from '../content';
import { breakLines } from '../layer/shaping';
import { drawBoxes } from '../sheet/boxes';
import { drawQr } from '../sheet/qr';
import { contentWidth, edges, types, type Sheet } from '../sheet/sheet';
import { drawTable } from '../sheet/table';
import { counted } from '../words';
import { drawOwnSignatures } from './own-signature';
import { drawPageSignature } from './page-signature';

/** 29 mm: with its quiet zone still above the 25 mm that a phone reads without trouble. */
const qrSize = 83;

/** How anybody can check the packet without the owner's help, and what none of it checks. */
export function drawVerification(sheet: Sheet, content: PacketContent): void {
  sheet.during('How to check this packet, continued', () => {
    sheet.newPage();
    sheet.anchor('verification');
    sheet.layer.bookmark('How to check this packet', 0, sheet.y);
    sheet.paragraph('How to check this packet', types.h1, { tag: 'H1' });
    sheet.gap(4);
    drawLink(sheet, content);
    drawSteps(sheet, content);
    drawLogs(sheet, content);
    drawOwnSignatures(sheet, content);
    drawFiles(sheet, content);
    drawPageSignature(sheet, content);
    drawNotChecked(sheet);
  });
}

function drawLink(sheet: Sheet, { link, number }: PacketContent): void {
  if (link === null) return;
  const { layer, y } = sheet;
  const x = edges.right - qrSize;
  drawQr(sheet, link, `QR code of this packet’s viewing link, ${link}`, x, y, qrSize);
  const width = contentWidth - qrSize - 20;
  const words =
    `The same record in a browser, as it stands when you open it. The link is this packet’s own (${number}); ` +
    'the owner can revoke it. It is read-only and asks for no account.';
  const lines = [
    ...breakLines(words, types.body.face, types.body.size, width),
    ...breakLines(link, types.body.face, types.body.size, width),
  ];
  layer.tag('P', () => {
    sheet.block(lines, edges.left, y + 6, types.body);
  });
  sheet.y = y + qrSize + 2;
}

function drawSteps(sheet: Sheet, { site, record }: PacketContent): void {
  sheet.heading('Check it yourself', { above: 8 });
  const steps = [
    'This file holds every line of the record in the attached file record.json, and each picture drawn here as an attached file with the same bytes. Open the list of attachments in your PDF reader, or take them out with any PDF tool.',
    `Find the key below in another place: a mail about this record, an older packet, the method page (${site}/method). Anybody could make a file with a key of their own; without this step a check shows only that the file fits itself.`,
    `Check with the program verify.mjs, one file that runs on your own computer with Node and asks nobody: node verify.mjs THIS-FILE.pdf --key KEY. Take it from ${site}/verify.mjs or, better, from somebody else who runs Witnessmark, and compare its SHA-256 with the method page. In a browser: ${site}/verify; that page comes from the installation being checked.`,
    'Unchanged: every opened word and picture is what was sealed. Altered: what differs is named. With an older packet of this record, add --against OLDER.pdf: it shows whether anything was rewritten since.',
    'The format is open: canonical JSON (RFC 8785), SHA-256, a Merkle tree (RFC 6962), signed checkpoints with Ed25519, time stamps (RFC 3161). Another program can be written from it.',
  ];
  sheet.layer.tag('L', () => {
    steps.forEach((step, i) => {
      sheet.layer.tag('LI', () => {
        sheet.room(types.body.leading * 2);
        const top = sheet.y;
        sheet.layer.tag('LBody', () => {
          sheet.lineAt(`${i + 1}`, edges.left, top, types.strong);
          for (const line of breakLines(step, types.body.face, types.body.size, contentWidth - 16)) {
            sheet.room(types.body.leading);
            sheet.lineAt(line, edges.left + 16, sheet.y, types.body);
            sheet.y += types.body.leading;
          }
        });
        sheet.gap(3);
      });
    });
  });
  sheet.gap(6);
  drawBoxes(sheet, 1, [
    {
      label: 'Fingerprint of the signing key (SHA-256)',
      value: record.log.fingerprint,
      kind: 'hash',
    },
    { label: 'Verifier key', value: record.log.verifierKey, kind: 'hash' },
  ]);
}

function drawLogs(sheet: Sheet, { record, scope }: PacketContent): void {
  const closed = scope.closed.includes('prices') ? 'without prices' : 'prices opened where sealed';
  sheet.heading('Logs in this packet');
  const row = (log: LogView, subject: string, opened: string) => [
    subject,
    log.id,
    `${log.origin}`,
    counted(log.size, 'entry', 'entries'),
    log.root,
    opened,
  ];
  const withheld = record.entries.reduce((sum, entry) => sum + entry.withheld.length, 0);
  drawTable(
    sheet,
    [
      { title: 'Log', share: 1 },
      { title: 'Id', share: 2.2, type: types.hash },
      { title: 'Origin', share: 1.6 },
      { title: 'Size', share: 1.2 },
      { title: 'Root (base64)', share: 2.6, type: types.hash },
      { title: 'Opened', share: 2 },
    ],
    [
      row(record.log, 'machine', withheld === 0 ? 'every part' : `all but ${counted(withheld, 'part', 'parts')}`),
      ...record.shelves.map(({ log, purchases }) =>
        row(
          log,
          'shelf',
          `${counted(purchases.length, 'purchase', 'purchases')} of ${counted(log.size, 'entry', 'entries')}, ${closed}`,
        ),
      ),
    ],
  );
  sheet.gap(4);
  sheet.paragraph(
    'Every line of these logs is in record.json, in order, so nothing can be left out unseen; what is not opened is withheld by name and counted. “Complete” means: as of these sizes.',
    types.small,
  );
}

function drawFiles(sheet: Sheet, { files, recordJson }: PacketContent): void {
  sheet.heading('Attached files', { below: 40 });
  const bytes = Buffer.byteLength(recordJson);
  const drawn = [...files.values()].filter(({ size }) => size !== null).length;
  sheet.paragraph(
    `record.json (${bytes.toLocaleString('en-US')} bytes) and ${counted(files.size, 'shared copy', 'shared copies')}, ` +
      `${drawn} of them drawn as plates from the very bytes attached.`,
  );
  const { missing } = sheet.layer;
  if (missing.size === 0) return;
  const points = [...missing].map((character) => {
    const point = (character.codePointAt(0) ?? 0).toString(16).toUpperCase().padStart(4, '0');
    return `U+${point}`;
  });
  sheet.gap(3);
  sheet.paragraph(
    `The typefaces of this packet lack ${counted(points.length, 'character', 'characters')} of the record, printed as crossed boxes: ${points.join(', ')}. record.json has them.`,
  );
}

function drawNotChecked(sheet: Sheet): void {
  sheet.heading('What this shows, and what it cannot');
  sheet.paragraph(whatIsShown);
  sheet.gap(4);
  sheet.paragraph(
    'Not checked by any of this: whether the work was done as written; whether the papers are genuine; whether what was bought went into this machine; whether a person is who they say; whether a time stamp’s authority is independent, until you supply its root; whether the pages say the same as record.json. What counts is record.json, and a checker shows the entries from there. Nothing here is legal advice; the warranty’s text and the law where you live decide.',
  );
}

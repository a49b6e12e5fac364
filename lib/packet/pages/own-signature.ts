import 'server-only';
import { formatInstant } from '@/lib/domain/instants';
import { ownSignatureLimit, ownSignatureWords } from '@/lib/domain/own-signature-words';
import { groupHash } from '@/lib/domain/hash-words';
import { fromBase64Url } from '@/lib/evidence/bytes';
import { sha256Hex } from '@/lib/evidence/hash';
import { isKeyBody } from '@/lib/evidence/statement';
import type { EntryView } from '@/lib/services/record-view';
import type { PacketContent } from '../content';
import type { Cell } from '../sheet/boxes';
import type { Sheet } from '../sheet/sheet';

type Finding = EntryView['ownSignature'];

/** What can be said of a signature made outside the server, as this installation has checked it; a reader's check repeats it. */
export function ownSignatureSentence(found: Finding): string {
  if (found === undefined) return 'No signature was made outside this server.';
  if (found.result === 'fails') return `The signature it carries does not hold: ${found.reason}.`;
  if (found.result === 'not-checked') {
    return `${ownSignatureWords}; whose key it is cannot be checked here, because the entry that names it is withheld.`;
  }
  const { site, keySeq } = found.signature;
  return `${ownSignatureWords}: approved on ${site} with the key that entry ${keySeq} names. ${ownSignatureLimit}`;
}

/** What a `signature` or a `key` entry says. */
export function ownSignatureCells(entry: EntryView): Cell[] {
  if (entry.kind === 'signature') {
    const isGap = entry.ownSignature?.result === 'fails';
    return [{ label: 'Own signature', value: ownSignatureSentence(entry.ownSignature), span: 4, isGap }];
  }
  if (!isKeyBody(entry.body)) return [{ label: 'Key', value: 'cannot be read', span: 4, isGap: true }];
  const fingerprint = sha256Hex(fromBase64Url(entry.body.publicKey));
  const note = 'Statements that are signed with it later are checked by this entry.';
  return [
    { label: 'Key of', value: entry.author?.name ?? 'name withheld', note, span: 4 },
    {
      label: 'SHA-256 of the public key',
      value: groupHash(fingerprint),
      kind: 'hash',
      note: 'Whose key it is, is this installation’s word: compare this with one you have from its holder.',
      span: 4,
    },
  ];
}

/** Those who signed an entry in entries of their own. */
export function drawSignedBy(sheet: Sheet, entry: EntryView, { zone }: PacketContent): void {
  if (entry.signedBy === undefined) return;
  sheet.heading('Own signatures', { tag: 'H3', below: 40 });
  for (const { seq, sealedAt, author, ownSignature } of entry.signedBy) {
    const who = author === null ? 'Name withheld' : `${author.name}, ${author.role}`;
    sheet.paragraph(
      `${who}, in entry ${seq}, sealed ${formatInstant(sealedAt, zone)}. ${ownSignatureSentence(ownSignature)}`,
    );
    sheet.gap(3);
  }
}

/** Which statements carry a signature made outside the server: for the page on how to check. */
export function drawOwnSignatures(sheet: Sheet, { record }: PacketContent): void {
  const signed = record.entries.filter(({ ownSignature }) => ownSignature?.result === 'holds');
  sheet.heading('Signatures made outside this server', { below: 40 });
  if (signed.length === 0) {
    sheet.paragraph('None: behind every statement here stands an account of this installation, and nothing else.');
    return;
  }
  const words = signed.map(({ seq, kind, refersTo, author }) => {
    const what = kind === 'signature' ? `of entry ${refersTo?.seq ?? '?'}` : 'of the countersignature itself';
    return `entry ${seq} (${what}, by ${author?.name ?? 'a person not named here'})`;
  });
  sheet.paragraph(
    `Carried by ${words.join('; ')}. Each was made with the signer’s own key (WebAuthn, ES256) over the statement at ` +
      `its place; the program checks it without asking this server. Whose key it is, is this installation’s word until you compare ` +
      `its fingerprint with its holder. ${ownSignatureLimit}`,
  );
}

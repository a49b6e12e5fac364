import { PDFDocument } from 'pdf-lib';
import { bundleText, signBundle } from '@/lib/evidence/bundle';
import { utf8 } from '@/lib/evidence/bytes';
import { makeDisclosure, openDisclosure } from '@/lib/evidence/disclosure';
import type { AlterationCode } from '@/lib/evidence/codes';
import { sha256Hex } from '@/lib/evidence/hash';
import {
  attacker, author, buildRecord, installation, keyOf, listedOil, nextSalt, signedText, unsignedBundle,
} from './build-record'; // prettier-ignore
import { newDeviceKey, signStatement } from './sign-statement';

/** A file somebody hands over, and what a verifier with the installation's key must find. */
export interface Forgery {
  /** As the end of "a forger who …". */
  what: string;
  name: 'record.json' | 'packet.pdf';
  bytes: () => Promise<Uint8Array> | Uint8Array;
  /** Empty: it cannot even be read. */
  codes: AlterationCode[];
}

const record = buildRecord();
const good = () => signBundle(unsignedBundle(record), installation);
const logs = () => [record.machine.toLog(), record.shelf.toLog()] as const;
const json = (what: string, forge: () => string, codes: AlterationCode[]): Forgery => ({
  what,
  name: 'record.json',
  bytes: () => utf8(forge()),
  codes,
});

/** The list that both verifiers are held to. Each forger is given a good signature where that is not the point. */
export const forgeries: Forgery[] = [
  json(
    'lists an own key second and signs with it',
    () => signedText(unsignedBundle(record, { verifierKeys: [keyOf(installation), keyOf(attacker)] }), attacker),
    ['unknown-key'],
  ),
  json(
    'leaves out the strike',
    () => {
      const [machine, shelf] = logs();
      return signedText(unsignedBundle(record, { logs: [{ ...machine, entries: machine.entries.slice(0, 3) }, shelf] }));
    },
    ['entries-missing'],
  ),
  json('moves the date of last year’s packet', () => bundleText({ ...good(), madeAt: '2027-05-01T12:00:00.000Z' }), [
    'bundle-changed',
  ]),
  json(
    'moves the date in the signed text too',
    () => {
      const moved = { ...good(), madeAt: '2027-05-01T12:00:00.000Z' };
      const [signatureLine] = /— .*\n$/.exec(moved.signature) ?? [''];
      const statement = signBundle(moved, attacker).signature.split('\n\n')[0];
      return bundleText({ ...moved, signature: `${statement}\n\n${signatureLine}` });
    },
    ['bad-signature'],
  ),
  json(
    'opens one part twice, with two contents',
    () => {
      const [machine, shelf] = logs();
      const parts = machine.entries[2]?.parts ?? [];
      const body = openDisclosure(parts[2] ?? '');
      parts.push(makeDisclosure('body', { ...(body.value as object), statement: 'Somebody else did.' }, nextSalt()).disclosure);
      return signedText(unsignedBundle(record, { logs: [machine, shelf] }));
    },
    ['part-mismatch'],
  ),
  json(
    'adds a shared copy that no line names',
    () => {
      const copy = { ...listedOil, name: 'oil-shared.jpg', sha256: sha256Hex(utf8('another picture')), bytes: 15 };
      return signedText(unsignedBundle(record, { files: [...good().files, copy] }));
    },
    ['file-unbound'],
  ),
  json('uses a countersignature again in another capacity', reusedCountersignature, ['statement-signature-invalid']),
  {
    what: 'puts two record.json into one PDF',
    name: 'packet.pdf',
    bytes: async () => {
      const document = await PDFDocument.create();
      document.addPage();
      for (const text of [bundleText(good()), signedText(unsignedBundle(record, { purpose: 'Sale' }))]) {
        await document.attach(utf8(text), 'record.json', { mimeType: 'application/json' });
      }
      return document.save();
    },
    codes: [],
  },
]; // prettier-ignore

function reusedCountersignature(): string {
  const { shelf, machine: begun, service } = buildRecord();
  const machine = begun.fork();
  const technician = { person: 'c0ffee00-0000-4000-8000-000000000004', name: 'Teodora Lindqvist', role: 'shop' };
  const key = newDeviceKey();
  const words = {
    capacity: 'checked-papers',
    statement: 'We saw the papers.',
    shop: { name: 'Halyard Cycle Works', accountSince: '2025-01-01T00:00:00.000Z', confirmedBy: null },
    invitedBy: author.person,
  };
  const named = { person: technician.person, publicKey: key.publicKey };
  machine.append({ kind: 'key', sealedAt: '2026-04-20T08:00:00.000Z', parts: { author: technician, body: named } });
  const signature = signStatement(key, { log: machine.id, refersTo: service, body: words });
  const body = { ...words, capacity: 'did-the-work', signature };
  machine.append({
    kind: 'countersignature',
    sealedAt: '2026-04-20T08:01:00.000Z',
    refersTo: service,
    parts: { author: technician, body },
  });
  return signedText(unsignedBundle(record, { logs: [machine.toLog(), shelf.toLog()], files: [] }));
}

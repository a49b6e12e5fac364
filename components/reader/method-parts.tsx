import type { ReactNode } from 'react';
import { WitnessMark, type MarkState } from '@/components/mark/witness-mark';
import { Definition } from '@/components/ui/definition';
import { Hash } from '@/components/ui/hash';
import { paths } from '@/lib/paths';
import { MonoCopy } from './mono-copy';

export function MethodSection({ id, title, children }: { id: string; title: string; children: ReactNode }) {
  return (
    <section aria-labelledby={id} className="mt-10">
      <h2 id={id} className="mb-2">
        {title}
      </h2>
      <div className="grid max-w-[70ch] gap-3">{children}</div>
    </section>
  );
}

const marks: { state: MarkState; words: string }[] = [
  { state: 'sealed', words: 'One stripe: sealed' },
  { state: 'countersigned', words: 'Two stripes: countersigned by a shop' },
  { state: 'waiting', words: 'Outline: its time stamp is still to come' },
  { state: 'struck', words: 'Greyed, with a line: struck, still readable' },
  { state: 'altered', words: 'Head turned, stripe broken: altered' },
];

/** The five states of the mark, each with its words. */
export function MarkLegend() {
  return (
    <ul role="list" className="mt-4 flex flex-wrap gap-x-8 gap-y-4">
      {marks.map(({ state, words }) => (
        <li key={state} className="flex w-56 items-center gap-3">
          <WitnessMark state={state} leafHash="9f2c41d70be86a53" size={56} title={null} className="shrink-0" />
          <span className="leading-snug">{words}</span>
        </li>
      ))}
    </ul>
  );
}

export interface KeyTableProps {
  /** Newest first. */
  keys: { verifierKey: string; fingerprint: string }[];
}

/** Every key that ever signed here; an old one stays, since older seals are checked with it. */
export function KeyTable({ keys }: KeyTableProps) {
  return (
    <Definition
      label="Keys of this installation, newest first"
      items={keys.map(({ verifierKey, fingerprint }, index) => ({
        term: index === 0 ? 'Key in use' : 'Older key',
        detail: (
          <>
            <MonoCopy text={verifierKey} what="verifier key" />
            <span className="label mt-1">Fingerprint</span>
            <span className="font-mono text-sm">{fingerprint}</span>
          </>
        ),
      }))}
    />
  );
}

const commands = [
  { what: 'A packet or a record', command: 'node verify.mjs FILE' },
  { what: 'With a key you trust, or its fingerprint', command: 'node verify.mjs FILE --key KEY' },
  { what: 'Against an older file', command: 'node verify.mjs FILE --against OLDER' },
  { what: 'With roots of time stamps that you trust', command: 'node verify.mjs FILE --tsa-roots PEM' },
  { what: 'With the pictures beside it', command: 'node verify.mjs record.json --files FOLDER' },
  { what: 'For another program', command: 'node verify.mjs FILE --json' },
];

/** Both forms of the check in one file: where to get them, how to know them, how to run them. */
export function VerifierPart({ program, page }: { program: string; page: string }) {
  return (
    <>
      <p className="flex flex-wrap gap-x-8">
        <a href={paths.verifyPage} download="verify.html" className="link inline-flex min-h-11 items-center">
          Download verify.html
        </a>
        <a href={paths.verifyProgram} download="verify.mjs" className="link inline-flex min-h-11 items-center">
          Download verify.mjs
        </a>
      </p>
      <Definition
        label="The check as one file"
        items={[
          { term: 'SHA-256 of verify.html', detail: <Hash value={page} what="SHA-256 of verify.html" /> },
          { term: 'To run it', detail: 'Open the saved file in a browser. It works without a connection.' },
          { term: 'SHA-256 of verify.mjs', detail: <Hash value={program} what="SHA-256 of verify.mjs" /> },
          ...commands.map(({ what, command }) => ({
            term: what,
            detail: <code className="font-mono text-sm break-all">{command}</code>,
          })),
          { term: 'It ends with', detail: '0 for unchanged, 1 for altered, 2 for unreadable or called wrongly' },
        ]}
      />
    </>
  );
}

const standards = [
  { term: 'One spelling for each text', detail: 'RFC 8785, canonical JSON' },
  { term: 'Hashes', detail: 'SHA-256, FIPS 180-4' },
  { term: 'The tree over all entries', detail: 'RFC 6962, section 2.1' },
  { term: 'Signed roots', detail: 'C2SP signed-note and tlog-checkpoint' },
  { term: 'Signatures', detail: 'Ed25519, RFC 8032' },
  { term: 'Time stamps', detail: 'RFC 3161 and RFC 5816' },
  { term: 'Parts that can be withheld', detail: 'RFC 9901, disclosure form' },
  { term: 'Units', detail: 'UCUM' },
];

export function StandardsTable() {
  return <Definition label="The format, from open standards only" items={standards} />;
}

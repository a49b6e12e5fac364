import { struckLines } from '@/lib/domain/standing';
import type { AboutLines } from '@/lib/evidence/about-lines';
import { whatIsShown } from '@/lib/evidence/format';
import { signedRoot, type EntryFinding, type Finding, type Stamp } from '@/lib/evidence/finding';

/** Invisible characters that could move a terminal's cursor or turn the direction of a line. */
const unsafe = /[\u0000-\u0008\u000b-\u001f\u007f-\u009f\u061c\u200e\u200f\u202a-\u202e\u2066-\u2069]/g;

/** The same text with every invisible character written out, safe to print wherever it came from. */
export function printable(text: string): string {
  return text.replace(unsafe, (character) => `\\u${character.charCodeAt(0).toString(16).padStart(4, '0')}`);
}

/** The finding as plain text: the outcome first, then what it rests on, then every entry. */
export function reportText(file: string, finding: Finding, about: AboutLines): string {
  const { bundle, counts, key } = finding;
  const lines = [`${finding.outcome.toUpperCase()}  ${file}`, finding.sentence, ''];
  if (bundle !== null) lines.push(`Record ${bundle.number}, made at ${bundle.madeAt}${bundle.purpose === '' ? '' : `, for: ${bundle.purpose}`}`);
  for (const log of finding.logs) {
    const signed = log.checkpoint === null ? 'no readable checkpoint' : `${log.checkpoint.size} entries, root ${signedRoot(log.checkpoint)}`;
    const lined = finding.entries.filter((entry) => entry.log === log.id);
    const opened = lined.filter((entry) => bodyOf(entry) !== undefined).length;
    lines.push(`Log of the ${log.subject}: ${log.origin}/${log.id}`, `  ${signed}`, `  ${opened} of ${lined.length} entries opened`);
  }
  if (key !== null) {
    const whose = key.source === 'reader' ? 'the key you gave' : 'the key found in the file itself';
    lines.push(`Checked with ${whose}: ${key.verifierKey}`, `  fingerprint ${key.fingerprint}`);
  }
  if (bundle !== null) {
    const { entries, entriesOpened, partsOpened, partsWithheld } = counts;
    const where = finding.logs.length > 1 ? ' in all logs' : '';
    lines.push(`${entriesOpened} of ${entries} entries opened${where} (${partsOpened} parts opened, ${partsWithheld} withheld)`);
  }
  const pages = pageWords[finding.pages];
  if (pages !== undefined) lines.push(`Pages: ${pages}`);
  if (finding.against !== null) lines.push(`Compared with the older file: ${finding.against.sentence}`);
  section(lines, 'Altered', finding.alterations.map((item) => `${item.sentence}\n      ${placed(item.code, item)}: ${item.technical}`));
  section(lines, 'To know', finding.remarks.map((item) => `${item.sentence} [${item.code}]`));
  section(lines, 'Not checked', finding.notChecked);
  section(lines, 'Time stamps', authorityLines(finding.entries));
  const struck = new Map(finding.logs.map(({ id }) => [id, struckIn(finding.entries, id, about)]));
  section(lines, 'Entries', finding.entries.map((entry) => entryLine(entry, about[placeOf(entry)], struck.get(entry.log)?.get(entry.seq))));
  if (bundle !== null) lines.push('', whatIsShown);
  return `${printable(lines.join('\n'))}\n`;
} // prettier-ignore

/** What a remark or a missing packet says already is not said twice. */
const pageWords: Partial<Record<Finding['pages'], string>> = {
  checked: 'as they were signed, over the whole file, with the certificate that the record names',
  changed: 'changed since they were signed; read only the entries here',
};

function section(lines: string[], title: string, items: string[]): void {
  if (items.length > 0) lines.push('', title, ...items.map((item) => `  - ${item}`));
}

function placed(code: string, place: { log?: string; seq?: number; part?: string }): string {
  const where = [place.log, place.seq, place.part].filter((item) => item !== undefined);
  return where.length === 0 ? code : `${code} at ${where.join('/')}`;
}

const bodyOf = ({ openedParts }: EntryFinding): unknown => openedParts.find(({ name }) => name === 'body')?.value;

/** On one line, so that no title can look like a line of the report. */
function titleOf(entry: EntryFinding): string {
  const body = bodyOf(entry);
  const title = typeof body === 'object' && body !== null && 'title' in body ? body.title : undefined;
  return typeof title === 'string' ? ` “${title.replace(/\s+/g, ' ')}”` : '';
}

function provenWords({ proven, earliestStamp }: EntryFinding): string {
  if (proven !== null) return `proven to exist by ${proven.genTime}`;
  return earliestStamp === null ? 'not proven' : `not proven (a time stamp says ${earliestStamp.genTime})`;
}

/** Who stamped, each once: those that a root vouches for first. */
function authorityLines(entries: EntryFinding[]): string[] {
  const counts = new Map<string, number>();
  const stamps = entries.flatMap(({ stampedBy }) => stampedBy);
  const order: Stamp['trust'][] = ['independent', 'unknown', 'own'];
  for (const stamp of stamps.toSorted((a, b) => order.indexOf(a.trust) - order.indexOf(b.trust))) {
    const words = authorityWords(stamp);
    counts.set(words, (counts.get(words) ?? 0) + 1);
  }
  return [...counts].map(([words, count]) => `${count} by ${words}`);
}

function authorityWords({ signer, trust, root }: Stamp): string {
  const name = signer === null ? 'an authority without a name' : `“${signer.replace(/\s+/g, ' ')}”`;
  if (trust === 'own') return `${name}: an installation’s own test authority, not independent`;
  if (root === null) return `${name}: under no root that you brought, so anybody may have made them`;
  const fingerprint = root.sha256.match(/.{4}/g)?.join(' ') ?? root.sha256;
  return `${name}: independent, under your root “${root.name.replace(/\s+/g, ' ')}”\n      root fingerprint ${fingerprint}`;
}

const placeOf = ({ log, seq }: EntryFinding) => `${log}/${seq}`;

/** By seq: the strike that withdraws a line. A line with a problem strikes nothing. */
function struckIn(entries: EntryFinding[], log: string, about: AboutLines): Map<number, number> {
  const sound = entries.filter((entry) => entry.log === log && entry.problems.length === 0);
  return struckLines(
    sound.map((entry) => ({ seq: entry.seq, kind: entry.kind ?? '', refersToSeq: about[placeOf(entry)] ?? null })),
  );
}

function entryLine(entry: EntryFinding, about: number | undefined, struckBy: number | undefined): string {
  const { claimed } = entry;
  const moment = claimed?.finishedAt ?? claimed?.startedAt;
  const said = moment === undefined ? '' : `, claimed ${moment.date}${moment.time === undefined ? '' : ` ${moment.time}`} ${moment.zone}`;
  const closed = entry.withheldParts.length === 0 ? '' : `, withheld: ${entry.withheldParts.join(' ')}`;
  const wrong = entry.problems.length === 0 ? '' : ` !! ${entry.problems.join(' ')}`;
  const own = entry.deviceSignature === null ? '' : `, signed with the signer’s own key, outside the server, on ${entry.deviceSignature.site} (key named in entry ${entry.deviceSignature.keySeq})`;
  const later = `${about === undefined ? '' : ` about entry ${about}`}${struckBy === undefined ? '' : `, STRUCK by entry ${struckBy}`}`;
  return `${entry.log.slice(0, 8)} ${entry.seq} ${entry.kind ?? 'unreadable'}${titleOf(entry)}${later}${said}, sealed ${entry.sealedAt ?? 'unknown'}, ${provenWords(entry)}${own}${closed}${wrong}`;
} // prettier-ignore

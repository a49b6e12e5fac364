import { blackedOutFrom } from '@/lib/domain/blacked-out';
import { formatInstant, formatLocalDate } from '@/lib/domain/instants';
import { convert, Decimal, formatAmount, units } from '@/lib/domain/units';
import { ownAuthorityName } from '@/lib/evidence/own-authority';
import type { Amount, Attachment, AuthorPart } from '@/lib/evidence/format';
import type { EntryView, TokenView } from '@/lib/services/record-view';

export const stateWords: Record<EntryView['state'], string> = {
  sealed: 'sealed',
  countersigned: 'countersigned',
  waiting: 'stamp to come',
  struck: 'struck',
};

export function authorWords({ name, role, sealedBy }: AuthorPart): string {
  const words = `${name}, ${role}`;
  return sealedBy === undefined || sealedBy === name ? words : `${words}; sealed by ${sealedBy}`;
}

/** How a picture or paper is drawn small. */
export function plateKind({ role, mediaType }: Attachment): 'pdf' | 'receipt' | 'photo' {
  if (mediaType === 'application/pdf') return 'pdf';
  return role.startsWith('receipt') ? 'receipt' : 'photo';
}

/** What was taken out of a shared copy, the one trade word explained. */
export const removedWords = (removed: string[]): string =>
  removed.map((one) => one.replace('other EXIF', 'other camera data (EXIF)')).join(', ');

/** How far a shop is known to anybody but the owner who invited it. */
export function confirmedWords(confirmedBy: string | null): string {
  if (confirmedBy === null) return 'not confirmed: this could be the owner';
  return `confirmed by ${confirmedBy === 'steward' ? 'the steward, who runs this installation' : confirmedBy}`;
}

/** The camera's word and the server's clock, kept apart. */
export function takenWords(attachment: Attachment, zone: string): string {
  const { takenAt, receivedAt } = attachment;
  if (blackedOutFrom(attachment) !== null) return `Made ${formatInstant(receivedAt, zone)}`;
  const received = `received ${formatInstant(receivedAt, zone)}`;
  if (takenAt === undefined) return `No time in the file; ${received}`;
  const [date = '', time = ''] = takenAt.local.split(/[T ]/);
  const day = /^\d{4}-\d{2}-\d{2}$/.test(date) ? formatLocalDate(date) : date;
  const offset = takenAt.offset === undefined ? 'zone not known' : `UTC${takenAt.offset}`;
  return `Camera’s word: ${day} ${time.slice(0, 5)}, ${offset}; ${received}`;
}

/** Who made a stamp, and what this installation can say of that. Its own word about itself is never independence. */
export function stamperWords({
  authority,
  isOwnAuthority,
  isIndependent,
  rootName,
}: Omit<TokenView, 'genTime' | 'sha256'>): string {
  if (isOwnAuthority) return 'this installation’s own test authority, not independent';
  if (!isIndependent) return `${authority}, under no root that this installation trusts`;
  return `${authority}, under ${rootName ?? 'a root'}, which this installation trusts`;
}

/** The authority whose stamp is still to come. */
export const stampToComeWords = (authority: string): string =>
  `Still to come from ${authority === ownAuthorityName ? 'this installation’s own test authority' : authority}`;

/** From here on a verifier calls a stamp late (72 hours). */
const lateDays = 3;
const millisecondsInDay = 86_400_000;

/** The third time: proven by the earliest independent stamp, else not, and why. */
export function provenWords(
  tokens: readonly TokenView[],
  { zone, sealedAt }: { zone: string; sealedAt: string },
): { words: string; note: string; isProven: boolean } {
  const earliest = [...tokens].sort((a, b) => a.genTime.localeCompare(b.genTime));
  const independent = earliest.find(({ isIndependent }) => isIndependent);
  if (independent !== undefined) {
    const days = Math.floor((Date.parse(independent.genTime) - Date.parse(sealedAt)) / millisecondsInDay);
    const late = days < lateDays ? '' : `${days} days after sealing, `;
    const note = `No later than this, ${late}by ${stamperWords(independent)}: check it with a root of your own`;
    return { words: formatInstant(independent.genTime, zone), note, isProven: true };
  }
  const first = earliest.find(({ isOwnAuthority }) => !isOwnAuthority) ?? earliest[0];
  if (first === undefined) return { words: 'Not proven', note: 'The time stamp is still to come', isProven: false };
  const advice = first.isOwnAuthority ? '' : ': check it with a root of your own';
  const note = `Stamped ${formatInstant(first.genTime, zone)} by ${stamperWords(first)}${advice}`;
  return { words: 'Not proven', note, isProven: false };
}

/** `4.26 L` for measures that are not metric; undefined where nothing is gained. */
export function metricWords({ amount, unit }: Amount): string | undefined {
  const target = { volume: 'L', torque: 'N.m' } as const;
  const { dimension } = units[unit];
  if (dimension !== 'volume' && dimension !== 'torque') return undefined;
  const metric = target[dimension];
  if (unit === metric || unit === 'mL') return undefined;
  const value = convert(amount, unit, metric).toFixed(units[metric].decimals, Decimal.ROUND_HALF_UP);
  return formatAmount({ amount: value, unit: metric });
}

/** `1234567` as `1.2 MB`. */
export function bytesWords(bytes: number): string {
  if (bytes < 1000) return `${bytes} bytes`;
  return bytes < 999_500 ? `${Math.round(bytes / 1000)} kB` : `${(bytes / 1_000_000).toFixed(1)} MB`;
}

export const counted = (count: number, one: string, many: string): string => `${count} ${count === 1 ? one : many}`;

/** `entries 3 and 5` */
export const addedWords = (seqs: number[]): string =>
  seqs.length === 1 ? `entry ${seqs[0]}` : `entries ${seqs.slice(0, -1).join(', ')} and ${seqs.at(-1)}`;

/** What an addendum says; undefined where its body is withheld. */
export function addendumText(body: unknown): string | undefined {
  const text = typeof body === 'object' && body !== null && 'text' in body ? body.text : undefined;
  return typeof text === 'string' ? text : undefined;
}

import 'server-only';
import { groupHash } from '@/lib/domain/hash-words';
import { formatInstant } from '@/lib/domain/instants';
import type { PartName } from '@/lib/evidence/format';
import type { ErasureView, TokenView } from '@/lib/services/record-view';
import type { PacketContent } from '../content';
import type { Cell } from '../sheet/boxes';
import { erasedWords } from './later-words';
import { types, type Sheet } from '../sheet/sheet';

/**
 * The third time, as the installation that drew the packet can say it, by the roots it trusts. Independence is never read
 * from a file, so the reader is told to check it with a root of their own.
 */
export function provenCell(tokens: TokenView[], zone: string): Cell {
  const others = tokens.filter(({ isOwnAuthority }) => !isOwnAuthority);
  const [first] = others.toSorted((a, b) => a.genTime.localeCompare(b.genTime));
  const [proven] = others
    .filter(({ isIndependent }) => isIndependent)
    .toSorted((a, b) => a.genTime.localeCompare(b.genTime));
  if (proven !== undefined) {
    const root = proven.rootName ?? 'a root';
    const note = `By ${proven.authority}, under ${root}, which this installation trusts: check it with a root of your own.`;
    return { label: 'Time proven', value: formatInstant(proven.genTime, zone), note };
  }
  if (first !== undefined) {
    const note = `Stamped ${formatInstant(first.genTime, zone)} by ${first.authority}: check it with a root of your own.`;
    return { label: 'Time proven', value: 'not proven', note };
  }
  const note = tokens.length === 0 ? 'The time stamp is still to come.' : 'Only this installation’s own stamp.';
  return { label: 'Time proven', value: 'not proven', note };
}

function stampWords({ genTime, authority, isOwnAuthority, isIndependent, rootName }: TokenView, zone: string): string {
  const known = isIndependent
    ? `under ${rootName ?? 'a root'}, which this installation trusts`
    : 'under no root that this installation trusts';
  const who = isOwnAuthority
    ? 'this installation’s own test authority, not independent'
    : `${authority}, ${known}; whether it is independent is for the reader to judge`;
  return `Stamped ${formatInstant(genTime, zone)} by ${who}.`;
}

/** The leaf hash in groups, its link to the leaf before, what is withheld, and the time stamps in words. */
export function drawLeaf(
  sheet: Sheet,
  leaf: {
    leafHash: string;
    previous?: string | null;
    withheld?: PartName[];
    erasures?: ErasureView[];
    tokens: TokenView[];
  },
  { zone }: PacketContent,
): void {
  sheet.heading('Leaf hash', { tag: 'H3', below: 44, above: 12 });
  sheet.paragraph(groupHash(leaf.leafHash), types.hashLarge);
  if (leaf.previous !== undefined && leaf.previous !== null) {
    sheet.paragraph(`The leaf before it: ${groupHash(leaf.previous)}`, types.hash);
  }
  const stamps = leaf.tokens.map((token) => stampWords(token, zone));
  sheet.paragraph(stamps.length === 0 ? 'No time stamp yet: proven time none.' : stamps.join(' '), types.small);
  if (leaf.erasures !== undefined && leaf.erasures.length > 0) {
    sheet.paragraph(erasedWords(leaf.erasures, zone), types.small);
  }
  if (leaf.withheld !== undefined && leaf.withheld.length > 0) {
    sheet.paragraph(`Withheld here, and counted: ${leaf.withheld.join(', ')}.`, types.small);
  }
}

import { ownSignatureLimit } from '@/lib/domain/own-signature-words';
import type { MarkState } from '@/lib/domain/mark-geometry';
import type { DeviceSignature, EntryFinding, Finding } from '@/lib/evidence/finding';
import type { LaterLines } from './about-lines';
import { cut } from './cut';

/** The mark and its words. A line is called unchanged only where the whole file is and its key is not in doubt. */
export function lineState(
  { problems, earliestStamp }: EntryFinding,
  later: LaterLines | undefined,
  isTrusted: boolean,
): { mark: MarkState | null; words: string; isWrong: boolean } {
  if (problems.length > 0) return { mark: 'altered', words: 'altered', isWrong: true };
  if (!isTrusted) return { mark: null, words: 'nothing found at this line', isWrong: false };
  if (later?.struckBy != null) return { mark: 'struck', words: 'unchanged, struck', isWrong: false };
  const by = later?.countersignedBy ?? [];
  if (by.length > 0) {
    return { mark: 'countersigned', words: `unchanged, countersigned in entry ${by.join(', ')}`, isWrong: false };
  }
  if (earliestStamp === null) return { mark: 'waiting', words: 'unchanged, no time stamp', isWrong: false };
  return { mark: 'sealed', words: 'unchanged', isWrong: false };
}

/** What was checked of a line and its parts, in words. */
export function checkedWords({ seq, openedParts, withheldParts, problems }: EntryFinding): string {
  const link = seq === 0 ? 'its form and its seal' : `its form, its link to line ${seq - 1} and its seal`;
  const opened = openedParts.length === 0 ? 'no part is opened' : `${parts(openedParts.length)} opened`;
  const withheld = withheldParts.length === 0 ? '' : `, ${parts(withheldParts.length)} withheld (${withheldParts.join(', ')})`;
  const rest = withheldParts.length === 0 ? '' : ' Of what is withheld only the hash was seen.';
  return `Checked: ${link}; ${opened}${withheld}.${rest}${problems.length === 0 ? '' : ' What does not hold is named above.'}`;
} // prettier-ignore

const parts = (count: number) => `${count} ${count === 1 ? 'part' : 'parts'}`;

/** A signature made on somebody’s own device, and no more than it shows. */
export function deviceWords({ person, keySeq, site, signs }: DeviceSignature, { entries }: Finding): string {
  const author = entries
    .flatMap(({ openedParts }) => openedParts)
    .filter(({ name }) => name === 'author')
    .map(({ value }) => value as { person?: unknown; name?: unknown })
    .find((one) => one.person === person);
  const who = typeof author?.name === 'string' ? `the key that entry ${keySeq} calls ${author.name}’s` : `the key in entry ${keySeq}`;
  return cut(
    `Signed with the signer’s own key, outside the server that made this file: ${who}, at ${site}, for entry ${signs}. ${ownSignatureLimit} Nor does it show who they are.`,
  );
} // prettier-ignore

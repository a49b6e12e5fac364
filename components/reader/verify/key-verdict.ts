import type { Tone } from '@/components/ui/box';
import { fingerprint, parseVerifierKey } from '@/lib/evidence/checkpoint';
import type { Finding } from '@/lib/evidence/finding';
import type { PublishedKeys } from './use-published-keys';

export interface KeyVerdict {
  /** The file's key is not the one it should be: said before anything else. */
  alarm: { title: string; sentences: string[] } | null;
  rows: { term: string; words: string; tone: Tone }[];
  /** The key that the file presents as its own. */
  fileKey: { verifierKey: string; fingerprint: string } | null;
}

/**
 * Whose key it is, as far as that can be known from here: taken from the file, published by the installation that
 * serves this page, typed by the reader. Three questions, answered apart.
 */
export function keyVerdict(given: { used: Finding['key']; fileKeys: string[]; published: PublishedKeys }): KeyVerdict {
  const { used, fileKeys, published } = given;
  const fileKey = describe(fileKeys[0]);
  const typed = used?.source === 'reader' ? used.verifierKey : null;
  const isTyped = typed === null ? null : typed === fileKey?.verifierKey;
  const isPublished =
    typeof published === 'string' || fileKey === null ? null : published.some((key) => key.verifierKey === fileKey.verifierKey);
  const alarm = isTyped === false ? otherThanTyped(typed ?? '', given) : isTyped === null && isPublished === false ? notPublished : null;
  return {
    alarm,
    fileKey,
    rows: [
      {
        term: 'The key in the file',
        words: fileKey === null ? 'None that can be read.' : typed === null
          ? 'It was checked with this one. Anybody can make a file with a key of their own.'
          : 'Anybody can make a file with a key of their own.',
        tone: fileKey === null ? 'gap' : typed === null ? 'warn' : 'plain',
      },
      { term: 'The key you typed', words: typedWords(isTyped), tone: isTyped === false ? 'gap' : 'plain' },
      {
        term: 'The keys this installation publishes',
        words: publishedWords(published, isPublished),
        tone: isPublished === false ? (isTyped === true ? 'warn' : 'gap') : 'plain',
      },
    ],
  };
} // prettier-ignore

const notPublished = {
  title: 'This file was not signed with a key of this installation',
  sentences: [
    'The installation that serves this page does not publish the key that the file carries. Either the record comes from another installation, or somebody else made this file.',
    'Do not rely on it until you have compared its key with one you got another way.',
  ],
};

function otherThanTyped(typed: string, { fileKeys, published }: { fileKeys: string[]; published: PublishedKeys }) {
  const sentences = ['The file was signed with another key than the one you typed. Do not rely on anything in it.'];
  const publishes = (key: string | undefined) =>
    typeof published !== 'string' && published.some(({ verifierKey }) => verifierKey === key);
  if (fileKeys.includes(typed)) {
    sentences.push(
      'The file lists your key among older ones. Anybody can write that. If the installation changed its key, get the new one the way you got yours, and check again with it.',
    );
  }
  if (publishes(typed) && publishes(fileKeys[0])) {
    sentences.push('The installation that serves this page publishes both keys, the file’s as well as yours.');
  }
  return { title: 'This file was not signed with your key', sentences };
}

function typedWords(isTyped: boolean | null): string {
  if (isTyped === null) return 'None was typed.';
  return isTyped
    ? 'The same key: it was checked with the key you gave.'
    : 'Another key. It was checked with the key you gave, and does not fit it.';
}

function publishedWords(published: PublishedKeys, isPublished: boolean | null): string {
  if (published === 'not-asked') return 'Not asked: this copy of the page was opened from a file and asks nobody.';
  if (isPublished === null) return 'They could not be fetched, so nothing was compared.';
  return isPublished
    ? 'It publishes this same key. But this page comes from the installation that may be the one being checked, so that alone proves nothing: compare the fingerprint with one from a mail about this record, an older packet, or the people who made it.'
    : 'It does not publish this key.';
}

function describe(key: string | undefined): KeyVerdict['fileKey'] {
  try {
    return key === undefined ? null : { verifierKey: key, fingerprint: fingerprint(parseVerifierKey(key).publicKey) };
  } catch {
    return null;
  }
}

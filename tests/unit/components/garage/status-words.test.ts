import { describe, expect, it } from 'vitest';
import { clockTime, statusWords } from '@/components/garage/status-words';
import type { KeptDraft } from '@/components/garage/draft-store';

const draft: KeptDraft = {
  id: 'd', kind: 'worksheet', subject: 'sorrel', person: 'imke', createdAt: '', changedAt: '', isOnServer: true, state: 'open',
}; // prettier-ignore
const at = '2026-04-18T14:32:10.000Z';
const view = { draft, unsentCount: 0, savedHereAt: undefined, savedThereAt: undefined, keepProblem: undefined };

describe('the status line', () => {
  it('says saved on this phone from the moment the phone has it', () => {
    expect(statusWords({ ...view, unsentCount: 1, savedHereAt: at }, 'ok', 0).words).toBe(
      `Saved on this phone ${clockTime(at)}`,
    );
  });
  it('says saved on the server only when nothing waits', () => {
    const saved = { ...view, savedHereAt: at, savedThereAt: at };
    expect(statusWords(saved, 'ok', 0).words).toBe(`Saved on the server ${clockTime(at)}`);
    expect(statusWords(saved, 'ok', 1).words).not.toContain('server');
  });
  it.each([
    [1, 0, 'Waiting for signal, 1 change kept on this phone'],
    [12, 0, 'Waiting for signal, 12 changes kept on this phone'],
    [12, 2, 'Waiting for signal, 12 changes and 2 photos kept on this phone'],
    [0, 1, 'Waiting for signal, 1 photo kept on this phone'],
  ])('counts %i changes and %i photos that wait for signal', (changes, files, words) => {
    expect(statusWords({ ...view, unsentCount: changes, savedHereAt: at }, 'no-signal', files).words).toBe(words);
  });
  it('asks to sign in, and says that nothing is lost', () => {
    expect(statusWords({ ...view, unsentCount: 2, savedHereAt: at }, 'not-signed-in', 0)).toEqual({
      words: 'Sign in to send. 2 changes are kept on this phone.',
      tone: 'warn',
      needsSignIn: true,
    });
  });
  it('says first of all when the phone could not keep a change', () => {
    expect(statusWords({ ...view, unsentCount: 1, keepProblem: 'full' }, 'ok', 0)).toMatchObject({ tone: 'gap' });
  });
});

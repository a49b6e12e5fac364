import type { DraftView } from './open-draft';
import type { Signal } from './send-drafts';

export interface StatusWords {
  words: string;
  tone: 'plain' | 'warn' | 'gap';
  needsSignIn?: boolean;
}

const changes = (count: number): string => (count === 1 ? '1 change' : `${count} changes`);

/** The time of day at an instant, HH:MM, as the device's clock shows it. */
export function clockTime(instant: string): string {
  const date = new Date(instant);
  return `${String(date.getHours()).padStart(2, '0')}:${String(date.getMinutes()).padStart(2, '0')}`;
}

/** Where what was typed is now, in words. `waitingFiles` are photos the server does not have yet. */
export function statusWords(
  view: Pick<DraftView, 'draft' | 'unsentCount' | 'savedHereAt' | 'savedThereAt' | 'keepProblem'>,
  signal: Signal,
  waitingFiles: number,
  device = 'phone',
): StatusWords {
  const { unsentCount, savedHereAt, savedThereAt, keepProblem, draft } = view;
  if (keepProblem !== undefined) {
    return {
      words: `This ${device} could not keep the last change. Leave this page open until it is sent.`,
      tone: 'gap',
    };
  }
  if (draft.refusal !== undefined && unsentCount + waitingFiles > 0) {
    return { words: `${draft.refusal} ${kept(unsentCount, waitingFiles, device)}`, tone: 'gap' };
  }
  if (unsentCount + waitingFiles > 0) {
    if (signal === 'not-signed-in') {
      return { words: `Sign in to send. ${kept(unsentCount, waitingFiles, device)}`, tone: 'warn', needsSignIn: true };
    }
    if (signal === 'no-signal') return { words: waiting(unsentCount, waitingFiles, device), tone: 'warn' };
    if (savedHereAt !== undefined) return { words: `Saved on this ${device} ${clockTime(savedHereAt)}`, tone: 'plain' };
    return { words: kept(unsentCount, waitingFiles, device), tone: 'plain' };
  }
  if (savedThereAt !== undefined) return { words: `Saved on the server ${clockTime(savedThereAt)}`, tone: 'plain' };
  if (signal === 'not-signed-in') return { words: 'Sign in to send', tone: 'warn', needsSignIn: true };
  if (savedHereAt !== undefined) return { words: `Saved on this ${device} ${clockTime(savedHereAt)}`, tone: 'plain' };
  return { words: draft.isOnServer ? 'Saved on the server' : 'Nothing to save yet', tone: 'plain' };
}

function counted(unsent: number, files: number): string {
  const photos = files === 1 ? '1 photo' : `${files} photos`;
  if (files === 0) return changes(unsent);
  return unsent === 0 ? photos : `${changes(unsent)} and ${photos}`;
}
function waiting(unsent: number, files: number, device: string): string {
  return `Waiting for signal, ${counted(unsent, files)} kept on this ${device}`;
}
function kept(unsent: number, files: number, device: string): string {
  const isOne = unsent + files === 1;
  const text = counted(unsent, files);
  return `${text} ${isOne ? 'is' : 'are'} kept on this ${device}.`;
}

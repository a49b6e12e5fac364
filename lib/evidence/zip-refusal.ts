import { EvidenceError } from '@/lib/evidence/evidence-error';

/**
 * Refuses a ZIP; the sentence names what is wrong with it.
 *
 * @throws EvidenceError `unreadable`
 * @example demandZip(entry.method === 0, 'a file in it is packed in a way that is not read here');
 */
export function demandZip(holds: boolean, what: string): asserts holds {
  if (!holds) throw new EvidenceError('unreadable', `This ZIP file cannot be read as an export: ${what}.`);
}

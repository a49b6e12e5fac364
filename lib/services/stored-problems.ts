import 'server-only';
import type { Place } from '@/lib/evidence/finding';

/** Something in the store that is not as it was sealed. */
export interface StoredProblem extends Place {
  sentence: string;
  technical: string;
}

/** More would help nobody, and a store in ruins could fill the memory with them. */
const mostListed = 500;

/** Collects what is wrong; past the first five hundred it only counts. */
export class StoredProblems {
  readonly listed: StoredProblem[] = [];
  count = 0;

  add(place: Place, sentence: string, technical: string): void {
    this.count += 1;
    if (this.listed.length < mostListed) this.listed.push({ ...place, sentence, technical });
  }
}

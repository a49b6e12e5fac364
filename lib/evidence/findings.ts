import type { AlterationCode, RemarkCode } from '@/lib/evidence/codes';
import type { Alteration, Place, Remark } from '@/lib/evidence/finding';

/** More would help nobody, and a hostile file could fill the memory with them. */
const maxListed = 500;

/** Collects what a check finds. */
export class Findings {
  readonly alterations: Alteration[] = [];
  readonly remarks: Remark[] = [];
  readonly notChecked: string[] = [];
  readonly #problems = new Map<string, Set<AlterationCode>>();

  /** Something is not as it was sealed. */
  alter(code: AlterationCode, place: Place, sentence: string, technical: string): void {
    if (place.log !== undefined && place.seq !== undefined) {
      const key = `${place.log}/${place.seq}`;
      this.#problems.set(key, (this.#problems.get(key) ?? new Set()).add(code));
    }
    if (this.alterations.length < maxListed) this.alterations.push({ code, ...place, sentence, technical });
  }

  /** Something to know that alters nothing. */
  remark(code: RemarkCode, sentence: string, more: Place & { count?: number } = {}): void {
    if (this.remarks.length < maxListed) this.remarks.push({ code, ...more, sentence });
  }

  /** The codes found at one entry, each once. */
  problemsOf(log: string, seq: number): AlterationCode[] {
    return [...(this.#problems.get(`${log}/${seq}`) ?? [])];
  }
}

/**
 * What went wrong, as one technical line.
 *
 * @example reasonOf(new Error('no such key')); // 'no such key'
 */
export function reasonOf(error: unknown): string {
  return error instanceof Error ? error.message : String(error);
}

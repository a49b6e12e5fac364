/**
 * Numbers of entries as a short text: runs of three and more become ranges.
 *
 * @example writeSeqs([0, 1, 2, 5]) // '0-2,5'
 */
export function writeSeqs(seqs: readonly number[], { separator = ',', to = '-' } = {}): string {
  return runsOf(seqs)
    .flatMap(([first, last]) => {
      if (first === last) return [`${first}`];
      return last === first + 1 ? [`${first}`, `${last}`] : [`${first}${to}${last}`];
    })
    .join(separator);
}

/** No log a person fills by hand is longer; it also bounds what a range in an address can ask for. */
const mostSeqs = 20_000;

/**
 * Reads what `writeSeqs` wrote. Null where it is anything else, or names more numbers than a log has.
 *
 * @example readSeqs('0-2,5') // [0, 1, 2, 5]
 */
export function readSeqs(text: string): number[] | null {
  const seqs = new Set<number>();
  for (const range of text.split(',')) {
    const [, first, last = first] = /^(\d{1,9})(?:-(\d{1,9}))?$/.exec(range) ?? [];
    if (first === undefined || Number(last) < Number(first) || Number(last) - Number(first) >= mostSeqs) return null;
    for (let seq = Number(first); seq <= Number(last); seq += 1) seqs.add(seq);
    if (seqs.size > mostSeqs) return null;
  }
  return [...seqs].sort((a, b) => a - b);
}

function runsOf(seqs: readonly number[]): [number, number][] {
  const runs: [number, number][] = [];
  for (const seq of [...new Set(seqs)].sort((a, b) => a - b)) {
    const last = runs.at(-1);
    if (last !== undefined && last[1] === seq - 1) last[1] = seq;
    else runs.push([seq, seq]);
  }
  return runs;
}

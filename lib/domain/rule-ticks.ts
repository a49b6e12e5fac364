export interface RuleTick {
  at: number;
  level: 'major' | 'mid' | 'minor';
  /** Engraved beside a major tick. */
  text?: string;
}

const subdivisions = { 1: [5, 4], 2: [4, 5], 5: [5, 5] } as const;
const mostMajors = 5;

interface Steps {
  minor: number;
  midEvery: number;
  majorEvery: number;
}

/** Steps of 1, 2 or 5 times a power of ten, so that at most five numbers stand on the rule. */
function stepsFor(range: number): Steps {
  const power = 10 ** Math.floor(Math.log10(range / mostMajors));
  const lead = ([1, 2, 5] as const).find((digit) => range / (digit * power) <= mostMajors);
  const [perMajor, perMid] = subdivisions[lead ?? 1];
  const major = lead === undefined ? 10 * power : lead * power;
  return { minor: major / (perMajor * perMid), midEvery: perMid, majorEvery: perMajor * perMid };
}

/**
 * Ticks of an engraved rule from one figure to another, ends included. Numbers are grouped as "10,000".
 *
 * Unit: whatever the rule is in. Throws a RangeError unless `from` is below `to`.
 *
 * @example ruleTicks(0, 22_000).filter((tick) => tick.text).map((tick) => tick.text) // ['0', '5,000', '10,000', '15,000', '20,000']
 */
export function ruleTicks(from: number, to: number): RuleTick[] {
  if (!(from < to)) throw new RangeError('A rule runs from a lower to a higher figure.');
  const { minor, midEvery, majorEvery } = stepsFor(to - from);
  // Tenths have no exact binary form, so a tick on the very end may miss it by a hair.
  const hair = 1e-9;
  const [first, last] = [Math.ceil(from / minor - hair), Math.floor(to / minor + hair)];
  return Array.from({ length: last - first + 1 }, (_, index): RuleTick => {
    const step = first + index;
    const at = Number((step * minor).toPrecision(12));
    if (step % majorEvery === 0) return { at, level: 'major', text: at.toLocaleString('en-US') };
    return { at, level: step % midEvery === 0 ? 'mid' : 'minor' };
  });
}

/**
 * The next tick at or above a figure that must be on the rule, so that the rule ends where it is engraved.
 *
 * @example ruleEnd(0, 21_350) // 22000
 */
export function ruleEnd(from: number, most: number): number {
  if (!(from < most)) throw new RangeError('A rule runs from a lower to a higher figure.');
  const { minor, midEvery } = stepsFor(most - from);
  const mid = minor * midEvery;
  return Number((Math.ceil(most / mid - 1e-9) * mid).toPrecision(12));
}

const dayMs = 86_400_000;

/**
 * Ticks of a rule in time: years with numbers, quarters, months; on a rule of up to some two years July is named too.
 *
 * Unit: milliseconds since 1970 in UTC. Throws a RangeError unless `fromMs` is below `toMs`.
 *
 * @example timeTicks(Date.UTC(2024, 0, 1), Date.UTC(2026, 0, 1)).filter((tick) => tick.text).map((tick) => tick.text) // ['2024', 'July', '2025', 'July', '2026']
 */
export function timeTicks(fromMs: number, toMs: number): RuleTick[] {
  if (!(fromMs < toMs)) throw new RangeError('A rule runs from an earlier to a later day.');
  const days = (toMs - fromMs) / dayMs;
  const isShort = days <= 800;
  const yearsPerNumber = Math.max(1, Math.ceil(days / 365.25 / mostMajors - 0.01));
  const first = new Date(fromMs);
  const ticks: RuleTick[] = [];
  for (let month = first.getUTCMonth(); ; month += 1) {
    const at = Date.UTC(first.getUTCFullYear(), month, 1);
    if (at > toMs) return ticks;
    if (at < fromMs) continue;
    ticks.push({ at, ...timeLevel(new Date(at), isShort, yearsPerNumber) });
  }
}

function timeLevel(day: Date, isShort: boolean, yearsPerNumber: number): Omit<RuleTick, 'at'> {
  const month = day.getUTCMonth();
  const year = day.getUTCFullYear();
  if (month === 0 && year % yearsPerNumber === 0) return { level: 'major', text: String(year) };
  if (month === 6 && isShort) return { level: 'major', text: 'July' };
  return { level: month % 3 === 0 ? 'mid' : 'minor' };
}

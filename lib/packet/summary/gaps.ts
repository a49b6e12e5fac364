import { checkTitle } from '@/lib/domain/checks';
import type { Source } from '@/lib/evidence/format';
import type { EntryView, RecordView } from '@/lib/services/record-view';
import type { ServiceEntry } from '../content';
import type { Opened } from './opened';
import type { ItemSummary } from './items';
import { listed } from './listed';

export interface Gap {
  /** Null: it stands open now, or is about the record as a whole. */
  seq: number | null;
  /** Not one entry's, and no work mends it. */
  isWhole?: true;
  sentence: string;
}

/** By the roots this installation trusts; readers check with their own. */
export const isProven = ({ tokens }: EntryView) => tokens.some(({ isIndependent }) => isIndependent);

/** What a sceptical reader asks before looking at any entry: whose limits, whose clock, and what was withdrawn. */
export function wholeGaps({ entries, terms }: RecordView, opened: Opened): Gap[] {
  const whole = (sentence: string): Gap => ({ seq: null, isWhole: true, sentence });
  const stamped = entries.filter(isProven).length;
  const struck = entries.filter(({ struckBy }) => struckBy !== null).map(({ seq }) => seq);
  const named = struck.length === 1 ? `Entry ${struck[0]} is` : `Entries ${listed(struck.map(String), 'others')} are`;
  return [
    ...(opened.unjudged === 0 ? [] : [whole(withheldWords(opened))]),
    ...(stamped === 0
      ? [whole('No time is proven independently: every time here is this installation’s own word.')]
      : []),
    ...sourceGaps(terms).map(whole),
    ...(struck.length === 0
      ? []
      : [whole(`${named} struck: withdrawn with a reason, still readable, not counted here.`)]),
  ];
}

function withheldWords({ unjudged }: Opened): string {
  const what =
    unjudged === 1
      ? 'One entry that may hold work or a reading is'
      : `${unjudged} entries that may hold work or readings are`;
  return `${what} withheld: no interval, warranty or due date is judged by the rest.`;
}

/** A figure with no manual or paper behind it is the owner’s own. */
export const isUnnamed = ({ source: { kind, title } }: { source: Source }): boolean =>
  kind === 'common-practice' || title === undefined;

function sourceGaps(terms: RecordView['terms']): string[] {
  if (terms === null) return ['No terms are opened, so nothing is said of what was due.'];
  const { schedule, fluidPoints, fasteners, parts, warranty } = terms;
  const limits = schedule.filter(isUnnamed).length;
  const lines = [...fluidPoints, ...fasteners, ...parts];
  const figures = lines.filter(isUnnamed).length;
  const own = warranty.filter(isUnnamed).map(({ title }) => title);
  return [
    ...(limits === 0
      ? []
      : [`${limits} of ${schedule.length} limits of the schedule name no source: “in time” is by the owner’s terms.`]),
    ...(figures === 0 ? [] : [`${figures} of ${lines.length} lines of the spec sheet name no source.`]),
    ...own.map((title) => `The limits of the ${title} name no source.`),
  ];
}

/** Checks that say the same as an interval of the schedule, which is judged here by the newest terms. */
const intervalCheck = 'within-interval';

export function gapsOf(items: ItemSummary[], services: ServiceEntry[]): Gap[] {
  const late = items.flatMap(({ item, intervals }) =>
    intervals
      .filter(({ result }) => result === 'late')
      .map(({ to, from, sentence }) => ({
        seq: to.seq ?? null,
        sentence: `${item.title}, since ${from.seq === undefined ? 'first use' : `entry ${from.seq}`}: ${sentence}.`,
      })),
  );
  const checks = services.flatMap(({ seq, body }) =>
    (body?.checks ?? [])
      .filter(({ result, key }) => result === 'gap' && !(key === intervalCheck && late.some((one) => one.seq === seq)))
      .map(({ detail, key }) => ({ seq, sentence: ended(detail === '' ? checkTitle(key) : detail) })),
  );
  return [...late, ...checks].sort((a, b) => (a.seq ?? Number.MAX_SAFE_INTEGER) - (b.seq ?? Number.MAX_SAFE_INTEGER));
}
const ended = (text: string) => (/[.!?]$/.test(text) ? text : `${text}.`);

import { adherenceOf, adherenceSummary, type AdherenceInterval, type AdherenceSummary } from '@/lib/domain/adherence';
import type { DoneService, MachineHistory } from '@/lib/domain/schedule-limits';
import type { ScheduleItem } from '@/lib/evidence/format';
import { notJudged, type Opened } from './opened';

export interface ItemSummary {
  item: ScheduleItem;
  /** Empty where nothing is judged. */
  intervals: AdherenceInterval[];
  summary: AdherenceSummary;
  isJudged: boolean;
}

/**
 * How each item of the schedule was kept. What is withheld may hold the same work, or a reading, so with anything of
 * that kind closed only what was done is counted and no interval is judged.
 */
export function itemsOf(
  schedule: readonly ScheduleItem[],
  done: DoneService[],
  history: MachineHistory,
  opened: Opened,
): ItemSummary[] {
  return schedule.map((item) => {
    if (opened.unjudged > 0) {
      const times = new Set(done.filter((one) => one.item === item.item).map(({ seq }) => seq)).size;
      return { item, intervals: [], summary: unjudged(times, opened), isJudged: false };
    }
    const intervals = adherenceOf(item, done, history);
    return { item, intervals, summary: adherenceSummary(intervals), isJudged: true };
  });
}

function unjudged(done: number, opened: Opened): AdherenceSummary {
  const sentence = notJudged(opened);
  return { done, longestMonths: 0, longestDays: 0, late: 0, withinGrace: 0, notKnown: 0, sentence };
}

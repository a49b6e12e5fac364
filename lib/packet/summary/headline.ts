import { counted, lowered } from '../words';
import { isUnnamed } from './gaps';
import type { ItemSummary } from './items';
import { listed } from './listed';
import type { Opened } from './opened';

/** The news: what was late and by how much, then what was kept. */
export function headlineOf(items: ItemSummary[], services: number, opened: Opened): string {
  if (opened.unjudged > 0) {
    return `${opened.entries} of ${opened.of} entries are opened here; what is withheld is not judged.`;
  }
  const late = items.filter(({ summary }) => summary.late > 0);
  const kept = items.filter(({ summary, intervals }) => {
    const isJudged = intervals.some(({ result }) => result === 'in-time');
    return summary.late === 0 && summary.withinGrace === 0 && summary.notKnown === 0 && isJudged;
  });
  const whose = kept.some(({ item }) => isUnnamed(item)) ? ' by the owner’s terms' : '';
  const keptWords =
    kept.length === 0
      ? ''
      : `${listed(
          kept.map(({ item }) => lowered(item.title)),
          'other items',
        )} always in time${whose}`;
  if (late.length === 0) {
    if (kept.length === 0) return `${counted(services, 'service is', 'services are')} in this record.`;
    return `${keptWords.charAt(0).toUpperCase()}${keptWords.slice(1)}.`;
  }
  const lateWords =
    late.length <= 2
      ? late
          .map(({ item, summary }, i) => `${i === 0 ? item.title : lowered(item.title)} ${summary.sentence}`)
          .join('; ')
      : `Late: ${listed(
          late.map(({ item }) => lowered(item.title)),
          'other items',
        )}`;
  return `${lateWords}${keptWords === '' ? '' : `; ${keptWords}`}.`;
}

import { describe, expect, it } from 'vitest';
import { summarise } from '@/lib/packet/summary';
import type { RecordView } from '@/lib/services/record-view';
import { packetFixture } from '../../outside/packet-fixture';

const content = await packetFixture();
const summaryOf = (changed: Partial<RecordView>) =>
  summarise({ ...content, record: { ...content.record, ...changed } });
const wholeOf = (changed: Partial<RecordView>) =>
  summaryOf(changed).gaps.flatMap(({ isWhole, sentence }) => (isWhole === true ? [sentence] : []));

describe('summarise', () => {
  it('counts as bought every line of the receipts it prints, drawn from or not', () => {
    const [shelf] = content.record.shelves;
    const [first] = shelf?.purchases ?? [];
    if (shelf === undefined || first === undefined) throw new Error('The fixture has no purchase.');
    const oil = () => summaryOf({}).uses.find(({ what }) => what.startsWith('Fernhill V-Twin'));
    // 6 and 5 US qt bought; 4.5, 1.5 and 3 drawn.
    expect(oil()).toMatchObject({ bought: '11 US qt, 2 receipts', used: '9 US qt, 2 services', left: '2 US qt' });
    const more = { ...first, seq: 5, leafHash: 'aa', usedBy: [] };
    const { uses } = summaryOf({ shelves: [{ ...shelf, purchases: [...shelf.purchases, more] }] });
    expect(uses.find(({ what }) => what.startsWith('Fernhill V-Twin'))).toMatchObject({
      bought: '17 US qt, 3 receipts',
      left: '8 US qt',
    });
  });

  it('states first what is missing of the record as a whole', () => {
    const { gaps } = summaryOf({});
    const wholes = gaps.filter(({ isWhole }) => isWhole === true).length;
    expect(wholes).toBeGreaterThan(1);
    expect(gaps.slice(0, wholes).every(({ seq }) => seq === null)).toBe(true);
    expect(wholeOf({})).toContain('No time is proven independently: every time here is this installation’s own word.');
    expect(wholeOf({}).join(' ')).toContain('Entry 4 is struck');
    expect(wholeOf({ terms: null })).toContain('No terms are opened, so nothing is said of what was due.');
  });

  it('has nothing to say of sources once each line names one', () => {
    const { terms } = content.record;
    if (terms === null) throw new Error('The fixture has no terms.');
    const source = { kind: 'manual' as const, title: 'Owner’s manual', page: '112' };
    const sourced = <T>(list: T[]) => list.map((one) => ({ ...one, source }));
    const { schedule, fluidPoints, fasteners, parts, warranty } = terms;
    const named = {
      ...terms,
      schedule: sourced(schedule),
      fluidPoints: sourced(fluidPoints),
      fasteners: sourced(fasteners),
      parts: sourced(parts),
      warranty: sourced(warranty),
    };
    expect(wholeOf({ terms: named }).join(' ')).not.toContain('source');
    const [one, ...others] = named.schedule;
    if (one === undefined) throw new Error('The fixture has no schedule.');
    const common = { ...one, source: { kind: 'common-practice' as const } };
    expect(wholeOf({ terms: { ...named, schedule: [common, ...others] } }).join(' ')).toContain(
      `1 of ${named.schedule.length} limits of the schedule name`,
    );
  });

  it('says by whose terms an item was in time, where its limit names no source', () => {
    const { terms } = content.record;
    if (terms === null) throw new Error('The fixture has no terms.');
    const headlineBy = (source: (typeof terms.schedule)[number]['source']) => {
      const interval = { distances: [{ amount: '6000', unit: '[mi_i]' as const }] };
      const item = { item: 'engine-oil', title: 'Engine oil', action: 'replace' as const, source, interval };
      return summaryOf({ terms: { ...terms, schedule: [item] } }).headline;
    };
    expect(headlineBy({ kind: 'manual', title: 'Owner’s manual' })).toBe('Engine oil always in time.');
    expect(headlineBy({ kind: 'common-practice' })).toBe('Engine oil always in time by the owner’s terms.');
  });

  it('never calls an item always in time that was kept only within its grace', () => {
    const { terms } = content.record;
    if (terms === null) throw new Error('The fixture has no terms.');
    const item = {
      item: 'engine-oil', title: 'Engine oil', action: 'replace' as const, source: { kind: 'manual' as const, title: 'M' },
      interval: { distances: [{ amount: '4800', unit: '[mi_i]' as const }] },
      grace: { distances: [{ amount: '500', unit: '[mi_i]' as const }] },
    }; // prettier-ignore
    // Done at 980, 5,340 and 10,238 mi: the last 98 mi over 4,800.
    const { headline, items } = summaryOf({ terms: { ...terms, schedule: [item] } });
    expect(items[0]?.summary.sentence).toBe('within grace once');
    expect(headline).not.toContain('always in time');
  });
});

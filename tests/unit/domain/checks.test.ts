import { describe, expect, it } from 'vitest';
import type { Fill, ServiceBody, TermsBody } from '@/lib/evidence/format';
import {
  checkList,
  checkTitle,
  closedIntervals,
  frozenChecks,
  serviceChecks,
  type CheckKey,
  type CheckSources,
} from '@/lib/domain/checks';
import { bigVTwinTourer } from '@/lib/domain/presets';

const qt = (amount: string) => ({ amount, unit: '[qt_us]' as const });
const drawn = {
  purchase: { log: 'l', seq: 11, leafHash: 'aa' }, line: 1, product: 'Fernhill 20W-50', boughtOn: '2025-10-12',
  ...qt('4.5'), balanceBefore: qt('6'), balanceAfter: qt('1.5'),
}; // prettier-ignore
const fill: Fill = {
  point: 'engine', pointTitle: 'Engine', fillKind: 'wet', product: 'Fernhill 20W-50', grade: 'SAE 20W-50',
  amounts: [{ ...qt('4.25'), step: 'first' }, { ...qt('0.25'), step: 'top-up' }], specification: [qt('4.5')], draws: [drawn],
}; // prettier-ignore
const filter = {
  name: 'Oil filter',
  partNumber: 'TN-2204',
  quantity: '1',
  draws: [{ ...drawn, product: 'Tarn TN-2204', amount: '1', unit: '{piece}' as const }],
};
const torque = {
  fastener: 'engine-drain',
  fastenerTitle: 'Engine drain plug',
  amount: '20',
  unit: '[ft_i].[lbf_av]' as const,
  specification: [{ min: '14', max: '21', unit: '[ft_i].[lbf_av]' as const }],
};
type Task = ServiceBody['tasks'][number];
const task: Task = {
  key: 'engine-oil', title: 'Engine oil and filter', scheduleItem: 'engine-oil', action: 'replace',
  steps: [], inspections: [], fills: [fill], torques: [torque], parts: [filter], levelChecks: [],
}; // prettier-ignore
const terms: TermsBody = bigVTwinTourer();
terms.parts = terms.parts.map((part) => (part.part === 'oil-filter' ? { ...part, partNumbers: ['TN-2204'] } : part));
const odometer = { value: '10238', unit: '[mi_i]' as const, instrument: 0 };
const body: CheckSources['body'] = {
  termsSeq: 1, recorded: 'at-the-time', finishedAt: { date: '2025-10-19', time: '15:53', zone: 'America/Denver' }, odometer,
  performedBy: [{ person: 'Imke Vandersloot', capacity: 'owner' }], title: 'Engine oil and filter', tasks: [task], statement: 'Done.',
}; // prettier-ignore
const sources: CheckSources = {
  body,
  terms,
  attachments: [{ role: 'odometer' }],
  sealedAt: '2025-10-20T00:04:11.000Z',
  done: [{ item: 'engine-oil', on: '2025-01-02', odometer: { ...odometer, value: '5340' } }],
  history: { firstUse: { on: '2023-06-14' }, readings: [{ ...odometer, value: '5340', on: '2025-01-02' }] },
};
const check = (key: CheckKey, changed: Partial<CheckSources>) => {
  const found = serviceChecks({ ...sources, ...changed }).find((one) => one.key === key);
  return [found?.result, found?.detail];
};
const withTask = (changed: Partial<Task>) => ({ body: { ...body, tasks: [{ ...task, ...changed }] } });
const withBody = (changed: Partial<ServiceBody>) => ({ body: { ...body, ...changed } });

describe('serviceChecks', () => {
  it('meets all of them with a complete service', () => {
    expect(serviceChecks(sources).map(({ key, result }) => [key, result])).toEqual(
      checkList.map(({ key }) => [key, 'met']),
    );
  });
  it('freezes key, result and detail only, and gives the title back', () => {
    expect(Object.keys(frozenChecks(serviceChecks(sources))[0] ?? {})).toEqual(['key', 'result', 'detail']);
    expect(checkTitle('logged-soon')).toBe('Logged within 7 days');
    expect(checkTitle('of a later version')).toBe('of a later version');
  });

  it('names a part without a receipt, and what a receipt does not cover', () => {
    const pads = { name: 'Front brake pads', quantity: '2', draws: [] };
    expect(check('receipts', withTask({ parts: [pads] }))).toEqual(['gap', 'No receipt for the front brake pads']);
    const short = { ...fill, uncovered: qt('0.5') };
    expect(check('receipts', withTask({ fills: [short] }))).toEqual([
      'gap',
      'No receipt for 0.5 US qt of the engine fill',
    ]);
    expect(check('receipts', withTask({ fills: [], parts: [] }))[0]).toBe('not-applicable');
  });
  it('leaves a product’s name its capitals', () => {
    const pads = { name: 'Tarn front brake pads', quantity: '2', draws: [] };
    expect(check('receipts', withTask({ parts: [pads] }))[1]).toBe('No receipt for the Tarn front brake pads');
  });
  it('takes a workshop’s work order for its fluids, but not without the paper', () => {
    const shop = withBody({
      performedBy: [{ person: 'Halyard Cycle Works', capacity: 'shop' }],
      tasks: [{ ...task, fills: [{ ...fill, draws: [] }] }],
    });
    expect(check('receipts', { ...shop, attachments: [{ role: 'work-order' }] })[0]).toBe('met');
    expect(check('receipts', shop)[0]).toBe('gap');
  });

  it.each([
    ['2025-10-18', 'met'],
    ['2025-10-19', 'met'],
    ['2025-10-20', 'gap'],
  ])('bought on %s for work on the 19th: %s', (boughtOn, result) => {
    expect(check('bought-before-use', withTask({ fills: [{ ...fill, draws: [{ ...drawn, boughtOn }] }] }))[0]).toBe(
      result,
    );
  });

  it('compares grades and part numbers as people write them', () => {
    expect(check('grade-and-part-number', withTask({ fills: [{ ...fill, grade: '20w50' }] }))[0]).toBe('met');
    expect(check('grade-and-part-number', withTask({ fills: [{ ...fill, grade: 'SAE 10W-40' }] }))).toEqual([
      'gap',
      'Engine: SAE 10W-40 used, SAE 20W-50 specified',
    ]);
    expect(check('grade-and-part-number', withTask({ fills: [{ ...fill, grade: undefined }] }))[1]).toContain(
      'No grade recorded for the engine',
    );
    expect(check('grade-and-part-number', withTask({ parts: [{ ...filter, partNumber: 'TN-2205' }] }))[1]).toBe(
      'Oil filter: part number TN-2205 used, TN-2204 specified',
    );
    expect(check('grade-and-part-number', withTask({ fills: [], parts: [] }))[0]).toBe('not-applicable');
  });
  it('says which grades and part numbers it compared, and for what the spec sheet names none', () => {
    expect(check('grade-and-part-number', {})[1]).toBe(
      'Engine: SAE 20W-50, as specified. Oil filter: part number TN-2204, as specified',
    );
    const pads = { ...filter, name: 'Tarn front brake pads', partNumber: 'TN-5102' };
    expect(check('grade-and-part-number', withTask({ parts: [pads] }))[1]).toBe(
      'Engine: SAE 20W-50, as specified. The spec sheet names none for the Tarn front brake pads',
    );
  });

  // 5 % of the printed 4.5 US qt either way.
  it.each([
    ['4.274', 'gap'],
    ['4.275', 'met'],
    ['4.725', 'met'],
    ['4.726', 'gap'],
  ])('a fill of %s US qt: %s', (amount, result) => {
    expect(check('quantity', withTask({ fills: [{ ...fill, amounts: [{ ...qt(amount), step: 'first' }] }] }))[0]).toBe(
      result,
    );
  });
  it('has no opinion where no capacity is printed', () => {
    expect(check('quantity', withTask({ fills: [{ ...fill, specification: undefined }] }))[0]).toBe('not-applicable');
    expect(
      check('quantity', withTask({ fills: [{ ...fill, specification: [{ amount: '4000', unit: 'g' }] }] }))[0],
    ).toBe('not-applicable');
  });

  it.each([
    ['13.9', 'gap'],
    ['14', 'met'],
    ['21.1', 'gap'],
  ])('a torque of %s lbf·ft: %s', (amount, result) => {
    expect(check('torque', withTask({ torques: [{ ...torque, amount }] }))[0]).toBe(result);
  });
  it('says a torque in words', () => {
    expect(check('torque', withTask({ torques: [{ ...torque, amount: '30' }] }))[1]).toBe(
      'Engine drain plug: 30 lbf·ft is above the band of 14 to 21 lbf·ft',
    );
    expect(check('torque', withTask({ torques: [] }))[0]).toBe('not-applicable');
  });

  it('asks for the odometer, its photo and its sense', () => {
    expect(check('odometer-photographed', { attachments: [] })).toEqual(['gap', 'No photo of the odometer']);
    const unknown = withBody({ odometer: undefined, odometerUnknown: { why: 'instrument dead' } });
    expect(check('odometer-photographed', unknown)).toEqual(['gap', 'No odometer reading: instrument dead']);
    expect(check('odometer-plausible', unknown)[0]).toBe('not-applicable');
    expect(check('odometer-plausible', withBody({ odometer: { ...odometer, value: '5339' } }))).toEqual([
      'gap',
      '5,339 mi is below the 5,340 mi read on 2 Jan 2025',
    ]);
  });

  it.each([
    ['2025-10-26T15:53:00.000Z', 'met'],
    ['2025-10-27T05:59:00.000Z', 'met'],
    ['2025-10-27T06:00:00.000Z', 'gap'],
  ])('sealed at %s: %s', (sealedAt, result) => {
    expect(check('logged-soon', { sealedAt })[0]).toBe(result);
  });
  it('says how long it took, and calls paper paper', () => {
    expect(check('logged-soon', {})[1]).toBe('Sealed two hours after the work');
    expect(check('logged-soon', withBody({ recorded: 'from-paper' }))[0]).toBe('gap');
  });

  it('judges the interval this service closed', () => {
    expect(check('within-interval', {})).toEqual(['met', 'Engine oil and filter: 4,898 mi, 9 months: in time']);
    const late = {
      done: [{ item: 'engine-oil', on: '2024-09-02', odometer: { ...odometer, value: '5340' } }],
      history: { readings: [] },
    };
    expect(check('within-interval', late)).toEqual([
      'gap',
      'Engine oil and filter: 4,898 mi, 13 months: in time by distance, 47 days late',
    ]);
    expect(check('within-interval', withTask({ scheduleItem: undefined }))[0]).toBe('not-applicable');
  });
  it('calls nothing late that began before the record', () => {
    const bought = {
      done: [],
      history: { readings: [], recordStarts: { on: '2020-01-01', why: 'bought-used' as const } },
    };
    expect(check('within-interval', bought)[0]).toBe('not-applicable');
  });
  it('looks only at services up to this one', () => {
    const later = {
      done: [...sources.done, { item: 'engine-oil', on: '2026-03-01', odometer: { ...odometer, value: '14000' } }],
    };
    expect(closedIntervals({ ...sources, ...later })[0]?.interval).toMatchObject({
      result: 'in-time',
      to: { on: '2025-10-19' },
    });
  });
  it('names gaps without blame', () => {
    const all = serviceChecks({
      ...sources,
      attachments: [],
      sealedAt: '2025-12-01T00:00:00.000Z',
      ...withTask({ parts: [{ name: 'Pads', quantity: '2', draws: [] }] }),
    });
    const details = all.filter(({ result }) => result === 'gap').map(({ detail }) => detail);
    expect(details).toHaveLength(3);
    expect(details.join(' ')).not.toMatch(/you|fail|must|wrong|!/i);
  });
});

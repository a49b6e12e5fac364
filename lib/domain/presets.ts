import type { Amount, Fastener, FluidPoint, ScheduleItem, Source, SpecPart, TermsBody } from '@/lib/evidence/format';

/** What every preset line says until a manual is named. */
export const presetNotice = 'Common practice: replace with your manual’s figure.';

const commonPractice: Source = { kind: 'common-practice' };

// Round figures in both units, as practice has them: neither is a conversion of the other.
const kilometresByMiles = {
  '1000': '1600',
  '5000': '8000',
  '10000': '16000',
  '20000': '32000',
  '30000': '48000',
  '50000': '80000',
} as const;
function every(miles: keyof typeof kilometresByMiles): Amount[] {
  return [
    { amount: miles, unit: '[mi_i]' },
    { amount: kilometresByMiles[miles], unit: 'km' },
  ];
}

type Line = Omit<ScheduleItem, 'source'>;
// Common practice for a big air-cooled V-twin tourer with separate primary chaincase and gearbox; no source.
const scheduleLines: readonly Line[] = [
  {
    item: 'engine-oil',
    title: 'Engine oil and filter',
    action: 'replace',
    interval: { distances: every('5000'), months: '12' },
    firstService: { distances: every('1000') },
  },
  {
    item: 'primary',
    title: 'Primary chaincase oil',
    action: 'replace',
    interval: { distances: every('10000') },
    firstService: { distances: every('1000') },
  },
  {
    item: 'gearbox',
    title: 'Gearbox oil',
    action: 'replace',
    interval: { distances: every('20000') },
    firstService: { distances: every('1000') },
  },
  {
    item: 'fasteners',
    title: 'Fasteners',
    action: 'tighten',
    interval: {},
    firstService: { distances: every('1000') },
  },
  { item: 'front-brake-fluid', title: 'Front brake fluid', action: 'replace', interval: { months: '24' } },
  { item: 'rear-brake-fluid', title: 'Rear brake fluid', action: 'replace', interval: { months: '24' } },
  { item: 'clutch-fluid', title: 'Clutch fluid', action: 'replace', interval: { months: '24' } },
  { item: 'brake-pads', title: 'Brake pads', action: 'inspect', interval: { distances: every('5000') } },
  { item: 'air-filter', title: 'Air filter', action: 'inspect', interval: { distances: every('5000') } },
  { item: 'drive-belt', title: 'Drive belt', action: 'inspect', interval: { distances: every('5000') } },
  { item: 'tyres', title: 'Tyres', action: 'inspect', interval: { distances: every('5000') } },
  { item: 'battery', title: 'Battery', action: 'inspect', interval: { distances: every('5000') } },
  { item: 'cables', title: 'Cables', action: 'inspect', interval: { distances: every('5000') } },
  { item: 'steering-head', title: 'Steering head', action: 'adjust', interval: { distances: every('10000') } },
  {
    item: 'steering-head-grease',
    title: 'Steering head bearings',
    action: 'lubricate',
    interval: { distances: every('30000') },
  },
  { item: 'spark-plugs', title: 'Spark plugs', action: 'replace', interval: { distances: every('30000') } },
  { item: 'fork-oil', title: 'Fork oil', action: 'replace', interval: { distances: every('50000') } },
];

const fluidPointLines: readonly Omit<FluidPoint, 'source'>[] = [
  {
    point: 'engine',
    title: 'Engine',
    wetFill: [{ amount: '4.5', unit: '[qt_us]' }],
    startWith: [{ amount: '4', unit: '[qt_us]' }],
    grade: 'SAE 20W-50',
    levelPosition: 'on the side stand or upright, each with its own mark',
    levelTemperature: 'hot',
  },
  {
    point: 'primary',
    title: 'Primary chaincase',
    wetFill: [{ amount: '30', unit: '[foz_us]' }],
    levelPosition: 'upright, to the lower edge of the clutch pressure plate',
  },
  {
    point: 'gearbox',
    title: 'Gearbox',
    wetFill: [{ amount: '28', unit: '[foz_us]' }],
    startWith: [{ amount: '27', unit: '[foz_us]' }],
    levelPosition: 'on the side stand, level ground, dipstick screwed fully in',
  },
  { point: 'front-brake', title: 'Front brake', levelPosition: 'reservoir level' },
  { point: 'rear-brake', title: 'Rear brake', levelPosition: 'reservoir level' },
  { point: 'clutch', title: 'Clutch', levelPosition: 'reservoir level' },
];

const drainPlugBand: Fastener['bands'] = [{ min: '14', max: '21', unit: '[ft_i].[lbf_av]' }];
const fastenerLines: readonly Omit<Fastener, 'source'>[] = [
  { fastener: 'engine-drain', title: 'Engine drain plug', bands: drainPlugBand },
  { fastener: 'primary-drain', title: 'Primary drain plug', bands: drainPlugBand },
  { fastener: 'gearbox-drain', title: 'Gearbox drain plug', bands: drainPlugBand },
  {
    fastener: 'clutch-inspection-cover',
    title: 'Clutch inspection cover screws',
    bands: [{ min: '84', max: '108', unit: '[in_i].[lbf_av]' }],
    sequence: 'in the numbered sequence',
  },
  // 12 mm plugs in an aluminium head: from memory.
  { fastener: 'spark-plugs', title: 'Spark plugs', bands: [{ min: '11', max: '18', unit: '[ft_i].[lbf_av]' }] },
];

// Part numbers belong to a maker's catalogue: the rider enters them.
const partLines: readonly Omit<SpecPart, 'source' | 'partNumbers'>[] = [
  { part: 'oil-filter', title: 'Oil filter', quantity: '1' },
  { part: 'engine-drain-o-ring', title: 'Engine drain plug O-ring', quantity: '1' },
  { part: 'primary-drain-o-ring', title: 'Primary drain plug O-ring', quantity: '1' },
  { part: 'gearbox-drain-o-ring', title: 'Gearbox drain plug O-ring', quantity: '1' },
  { part: 'clutch-inspection-cover-seal', title: 'Clutch inspection cover seal', quantity: '1' },
  { part: 'air-filter', title: 'Air filter element', quantity: '1' },
  { part: 'front-brake-pads', title: 'Front brake pads', quantity: '2' },
  { part: 'spark-plugs', title: 'Spark plugs', quantity: '2' },
];

/**
 * Terms to start from for a big air-cooled V-twin tourer with separate primary chaincase and gearbox, without
 * warranty. Every figure is common practice without a source, says so, and is to be replaced by the manual's.
 *
 * @example bigVTwinTourer().schedule[0]?.item // 'engine-oil'
 */
export function bigVTwinTourer(): TermsBody {
  const withSource = <T extends object>(lines: readonly T[]): (T & { source: Source })[] =>
    structuredClone(lines).map((line) => ({ ...line, source: { ...commonPractice } }));
  return {
    schedule: withSource(scheduleLines),
    fluidPoints: withSource(fluidPointLines),
    fasteners: withSource(fastenerLines),
    parts: withSource(partLines.map((line) => ({ ...line, partNumbers: [] }))),
    warranty: [],
  };
}

/**
 * Terms with nothing in them, for a machine no preset suits.
 *
 * @example emptyTerms().schedule // []
 */
export function emptyTerms(): TermsBody {
  return { schedule: [], fluidPoints: [], fasteners: [], parts: [], warranty: [] };
}

import type { HoldPoint, Procedure } from './procedure';
import { simpleProcedures } from './procedures-simple';

export type { HoldPoint, InspectionPoint, Procedure } from './procedure';

/** What is found on a drain plug magnet, from memory. A magnet catches steel only. */
export const debrisGrades = [
  { grade: '0', title: 'Clean', text: 'Nothing to see.' },
  { grade: '1', title: 'Fuzz', text: 'Fine grey paste or fuzz: normal, more of it at running-in.' },
  { grade: '2', title: 'Paste', text: 'Heavy paste: look again early.' },
  { grade: '3', title: 'Slivers', text: 'Slivers or flakes: stop, find the cause.' },
  { grade: '4', title: 'Chips', text: 'Chips or pieces: do not run the machine.' },
] as const;

const support: HoldPoint = {
  key: 'support',
  title: 'Machine supported',
  text: 'Level ground, machine upright and held so that it cannot fall or roll.',
  caution: 'A machine that falls breaks bones. Do not work under it on the side stand alone.',
};
const collect: HoldPoint = {
  key: 'collect-used-oil',
  title: 'Used oil away',
  text: 'Used oil and the old filter go into a closed can and to a collection point.',
};
const tyresClean: HoldPoint = {
  key: 'tyres-clean',
  title: 'Tyres free of oil',
  text: 'Wipe what was spilt. Look at both tyres and the brake discs.',
  caution: 'Oil on a tyre or a disc takes the grip away at the first corner.',
};

function drainPoints(options: { title: string; fastener: string; part: string; warm: string }): {
  drain: HoldPoint;
  magnet: HoldPoint;
  ring: HoldPoint;
  plug: HoldPoint;
} {
  const { title, fastener, part, warm } = options;
  return {
    drain: {
      key: 'drain',
      title: 'Drain warm',
      text: `${warm} Take the drain plug out over the pan and let it drip off.`,
      caution: 'Oil and exhaust are hot. Gloves, long sleeves, no hurry.',
      leaves: { state: `${title} drained, not refilled: do not start.`, until: 'fill' },
    },
    magnet: {
      key: 'look-at-magnet',
      title: 'Look at the magnet',
      text: 'Look before wiping it. Take a photo, choose the grade, then wipe.',
      records: { inspection: `Magnet on the ${title.toLowerCase()} drain plug` },
    },
    ring: {
      key: 'new-o-ring',
      title: 'New O-ring',
      text: 'Clean the seat, fit a new O-ring, oil it lightly.',
      records: { part },
    },
    plug: {
      key: 'torque-drain-plug',
      title: 'Drain plug torque',
      text: 'Start it by hand. Pull smoothly; at the first click, stop.',
      caution: 'Clicking twice turns it further. A stripped case is dear.',
      records: { torque: fastener },
    },
  };
}

const engineDrain = drainPoints({
  title: 'Engine',
  fastener: 'engine-drain',
  part: 'engine-drain-o-ring',
  warm: 'Ride it warm, then stop the engine.',
});
const primaryDrain = drainPoints({
  title: 'Primary chaincase',
  fastener: 'primary-drain',
  part: 'primary-drain-o-ring',
  warm: 'Machine warm, engine off.',
});
const gearboxDrain = drainPoints({
  title: 'Gearbox',
  fastener: 'gearbox-drain',
  part: 'gearbox-drain-o-ring',
  warm: 'Machine warm, engine off.',
});

const engineOil: Procedure = {
  key: 'engine-oil',
  title: 'Engine oil and filter',
  action: 'replace',
  scheduleItems: ['engine-oil'],
  holdPoints: [
    support,
    {
      key: 'open-fill-point',
      title: 'Fill plug open',
      text: 'Open the fill plug before draining: what cannot be filled must not be drained.',
    },
    engineDrain.drain,
    engineDrain.magnet,
    engineDrain.ring,
    engineDrain.plug,
    {
      key: 'filter-off',
      title: 'Old filter off',
      text: 'Take the filter off. See that its old gasket came with it. Wipe the seat.',
      caution: 'Two gaskets on top of each other let the oil out at once.',
    },
    {
      key: 'filter-on',
      title: 'New filter on',
      text: 'Oil the gasket. Turn it on by hand until the gasket touches, then the part-turn its maker asks for, often a half to three quarters.',
      caution: 'By hand only, never with a tool.',
      records: { part: 'oil-filter' },
    },
    {
      key: 'fill',
      title: 'First fill',
      text: 'Fill less than the whole. The rest goes in after the hot check.',
      records: { fill: 'engine' },
    },
    {
      key: 'run-and-look',
      title: 'Run, look for leaks',
      text: 'Start it, watch the oil pressure lamp go out, let it idle. Look at plug and filter. Stop it.',
      caution: 'Outdoors or with the door open: exhaust gas kills. Lamp on after a few seconds: stop at once.',
    },
    {
      key: 'check-level',
      title: 'Level, hot',
      text: 'Check hot, in the position your mark is for. Top up between the marks and enter what went in.',
      caution: 'Exhaust and cases are hot.',
      records: { levelCheck: 'engine' },
    },
    tyresClean,
    collect,
  ],
  fluidPoints: ['engine'],
  fasteners: ['engine-drain'],
  parts: ['oil-filter', 'engine-drain-o-ring'],
  inspections: [
    { subject: 'Magnet on the engine drain plug', kind: 'debris' },
    { subject: 'Old filter', kind: 'words' },
  ],
  levelChecks: ['engine'],
};

const primary: Procedure = {
  key: 'primary',
  title: 'Primary chaincase',
  action: 'replace',
  scheduleItems: ['primary'],
  holdPoints: [
    support,
    {
      key: 'open-fill-point',
      title: 'Inspection cover off',
      text: 'Take the clutch inspection cover off before draining: this is where the new oil goes in.',
    },
    primaryDrain.drain,
    primaryDrain.magnet,
    primaryDrain.ring,
    primaryDrain.plug,
    {
      key: 'fill',
      title: 'Fill, upright',
      text: 'Fill with the machine upright, to the lower edge of the clutch pressure plate. A dry fill takes more than a wet fill.',
      records: { fill: 'primary', levelCheck: 'primary' },
    },
    {
      key: 'cover-on',
      title: 'Cover screws torque',
      text: 'New seal. Screws by hand first, then in the numbered sequence. At the first click, stop.',
      records: { torque: 'clutch-inspection-cover', part: 'clutch-inspection-cover-seal' },
    },
    tyresClean,
    collect,
  ],
  fluidPoints: ['primary'],
  fasteners: ['primary-drain', 'clutch-inspection-cover'],
  parts: ['primary-drain-o-ring', 'clutch-inspection-cover-seal'],
  inspections: [{ subject: 'Magnet on the primary chaincase drain plug', kind: 'debris' }],
  levelChecks: ['primary'],
};

const gearbox: Procedure = {
  key: 'gearbox',
  title: 'Gearbox',
  action: 'replace',
  scheduleItems: ['gearbox'],
  holdPoints: [
    support,
    {
      key: 'open-fill-point',
      title: 'Dipstick out',
      text: 'Unscrew the dipstick before draining: what cannot be filled must not be drained.',
    },
    gearboxDrain.drain,
    gearboxDrain.magnet,
    gearboxDrain.ring,
    gearboxDrain.plug,
    {
      key: 'fill',
      title: 'First fill',
      text: 'Fill a little less than the whole. The rest goes in after the level check.',
      records: { fill: 'gearbox' },
    },
    {
      key: 'check-level',
      title: 'Level, on the side stand',
      text: 'Side stand, level ground, dipstick screwed fully in. Top up and enter what went in.',
      records: { levelCheck: 'gearbox' },
    },
    tyresClean,
    collect,
  ],
  fluidPoints: ['gearbox'],
  fasteners: ['gearbox-drain'],
  parts: ['gearbox-drain-o-ring'],
  inspections: [{ subject: 'Magnet on the gearbox drain plug', kind: 'debris' }],
  levelChecks: ['gearbox'],
};

const free: Procedure = {
  key: 'free',
  title: 'Other work',
  action: 'inspect',
  scheduleItems: [],
  holdPoints: [],
  fluidPoints: [],
  fasteners: [],
  parts: [],
  inspections: [],
  levelChecks: [],
};

/** Every procedure, in the order they are offered. */
export const procedures: readonly Procedure[] = [engineOil, primary, gearbox, ...simpleProcedures, free];

/**
 * The procedure of a task's key; a key this version does not know is free work.
 *
 * @example procedureFor('primary').fluidPoints // ['primary']
 */
export function procedureFor(key: string): Procedure {
  return procedures.find((procedure) => procedure.key === key) ?? free;
}

/**
 * The procedure that does a schedule item, if there is one.
 *
 * @example procedureOfItem('front-brake-fluid')?.key // 'front-brake'
 */
export function procedureOfItem(item: string): Procedure | undefined {
  return procedures.find(({ scheduleItems }) => scheduleItems.includes(item));
}

/**
 * What to say on the bench while work has stopped halfway: the state of the machine after the steps done, or
 * undefined when it is whole.
 *
 * @example unfinishedState('primary', ['open-fill-point', 'drain']) // 'Primary chaincase drained, not refilled: do not start.'
 */
export function unfinishedState(key: string, stepsDone: readonly string[]): string | undefined {
  const done = new Set(stepsDone);
  return procedureFor(key).holdPoints.find(
    ({ key: step, leaves }) => leaves !== undefined && done.has(step) && !done.has(leaves.until),
  )?.leaves?.state;
}

import type { HoldPoint, Procedure } from './procedure';

const brakeCaution = 'Brakes stop you. If in doubt, a licensed workshop.';
const wheelCaution = 'Wheels and steering carry you. If in doubt, a licensed workshop.';

function simple(
  procedure: Pick<Procedure, 'key' | 'title' | 'action' | 'scheduleItems'> & Partial<Procedure>,
): Procedure {
  return {
    holdPoints: [],
    fluidPoints: [],
    fasteners: [],
    parts: [],
    inspections: [],
    levelChecks: [],
    ...procedure,
  };
}

function brakePoints(point: string, padPart: string | undefined): HoldPoint[] {
  const pads: HoldPoint[] =
    padPart === undefined
      ? []
      : [
          {
            key: 'pads',
            title: 'Pads',
            text: 'Look at pads and disc. Fit new pads as a set for each disc; press the pistons back slowly and watch the reservoir.',
            caution: 'Pads with grease or fluid on them are waste.',
            records: { part: padPart },
            leaves: { state: 'Pads changed, lever not yet hard: do not ride.', until: 'lever-hard' },
          },
        ];
  return [
    ...pads,
    {
      key: 'right-fluid',
      title: 'The right fluid',
      text: 'Read the grade on the reservoir cap. Open a sealed bottle.',
      caution: 'DOT 5 is silicone and is never mixed with the others. Brake fluid eats paint and eyes.',
    },
    {
      key: 'bleed',
      title: 'Bleed until clear',
      text: 'Keep the reservoir above its lower mark. Go on until the fluid runs clear and without bubbles.',
      records: { fill: point },
      leaves: { state: 'Brake open: do not ride.', until: 'lever-hard' },
    },
    {
      key: 'lever-hard',
      title: 'Lever hard',
      text: 'Pump until the lever is hard and stays hard under a minute of firm pull. Look at every joint.',
      caution: brakeCaution,
      records: { levelCheck: point },
    },
  ];
}

/** Tasks with few hold points. */
export const simpleProcedures: readonly Procedure[] = [
  simple({
    key: 'front-brake',
    title: 'Front brake pads and fluid',
    action: 'replace',
    scheduleItems: ['front-brake-fluid'],
    holdPoints: brakePoints('front-brake', 'front-brake-pads'),
    fluidPoints: ['front-brake'],
    parts: ['front-brake-pads'],
    inspections: [{ subject: 'Front pads and discs', kind: 'words' }],
    levelChecks: ['front-brake'],
  }),
  simple({
    key: 'rear-brake',
    title: 'Rear brake fluid',
    action: 'replace',
    scheduleItems: ['rear-brake-fluid'],
    holdPoints: brakePoints('rear-brake', undefined),
    fluidPoints: ['rear-brake'],
    inspections: [{ subject: 'Rear pads and disc', kind: 'words' }],
    levelChecks: ['rear-brake'],
  }),
  simple({
    key: 'brake-pads',
    title: 'Brake pads look',
    action: 'inspect',
    scheduleItems: ['brake-pads'],
    inspections: [{ subject: 'Front and rear pads', kind: 'words' }],
  }),
  simple({
    key: 'clutch-fluid',
    title: 'Clutch fluid',
    action: 'replace',
    scheduleItems: ['clutch-fluid'],
    holdPoints: [
      {
        key: 'right-fluid',
        title: 'The right fluid',
        text: 'Read the grade on the reservoir cap. Open a sealed bottle.',
        caution: 'DOT 5 is silicone and is never mixed with the others. The fluid eats paint and eyes.',
      },
      {
        key: 'bleed',
        title: 'Bleed until clear',
        text: 'Keep the reservoir above its lower mark. Go on until the fluid runs clear and without bubbles.',
        records: { fill: 'clutch' },
      },
    ],
    fluidPoints: ['clutch'],
    levelChecks: ['clutch'],
  }),
  simple({
    key: 'air-filter',
    title: 'Air filter',
    action: 'inspect',
    scheduleItems: ['air-filter'],
    holdPoints: [
      {
        key: 'intake-clean',
        title: 'Intake clean',
        text: 'Take the element out, look into the intake, wipe the box. Nothing may fall in.',
      },
    ],
    parts: ['air-filter'],
    inspections: [{ subject: 'Air filter element', kind: 'words' }],
  }),
  simple({
    key: 'drive-belt',
    title: 'Drive belt',
    action: 'inspect',
    scheduleItems: ['drive-belt'],
    holdPoints: [
      {
        key: 'look-all-round',
        title: 'Look all round',
        text: 'Engine off, key out. Turn the wheel by hand and look at every tooth, both edges, both pulleys.',
        caution: 'Belt and pulley take fingers. Turn by hand only.',
      },
    ],
    inspections: [{ subject: 'Drive belt and pulleys', kind: 'words' }],
  }),
  simple({
    key: 'tyres',
    title: 'Tyres',
    action: 'inspect',
    scheduleItems: ['tyres'],
    holdPoints: [
      {
        key: 'pressure-cold',
        title: 'Pressure, cold',
        text: 'Measure cold. Look at tread, sides and the date code: the last four digits are week and year.',
        caution: wheelCaution,
      },
    ],
    inspections: [
      { subject: 'Front tyre', kind: 'words' },
      { subject: 'Rear tyre', kind: 'words' },
    ],
  }),
  simple({
    key: 'spark-plugs',
    title: 'Spark plugs',
    action: 'replace',
    scheduleItems: ['spark-plugs'],
    holdPoints: [
      {
        key: 'engine-cold',
        title: 'Engine cold',
        text: 'Change plugs cold. Blow the dirt away before unscrewing; start the new ones by hand.',
        records: { torque: 'spark-plugs', part: 'spark-plugs' },
      },
    ],
    fasteners: ['spark-plugs'],
    parts: ['spark-plugs'],
    inspections: [{ subject: 'Old plugs', kind: 'words' }],
  }),
  simple({
    key: 'battery',
    title: 'Battery',
    action: 'inspect',
    scheduleItems: ['battery'],
    inspections: [{ subject: 'Battery, terminals and voltage', kind: 'words' }],
  }),
  simple({
    key: 'cables',
    title: 'Cables',
    action: 'inspect',
    scheduleItems: ['cables'],
    inspections: [{ subject: 'Cables, free play and run', kind: 'words' }],
  }),
  simple({
    key: 'steering-head',
    title: 'Steering head',
    action: 'adjust',
    scheduleItems: ['steering-head'],
    holdPoints: [
      {
        key: 'front-lifted',
        title: 'Front wheel off the ground',
        text: 'Lift the front so that it hangs free. Feel for play and for notches from lock to lock.',
        caution: wheelCaution,
      },
    ],
    inspections: [{ subject: 'Steering head', kind: 'words' }],
  }),
];

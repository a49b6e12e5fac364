import type { StoryCountersignature, StoryPurchase, StoryTask, StoryWork } from './story-types';

const engineOilProduct = 'Fernhill V-Twin 20W-50';
const driveOilProduct = 'Fernhill Primary and Gear';
const quart = ['1', '[qt_us]'] as const;
const bottle = ['32', '[foz_us]'] as const;

const engineOilLine = (containers: string, price: string, batch: string) => ({
  product: engineOilProduct,
  printed: `${engineOilProduct} 1 US qt x${containers}`,
  grade: 'SAE 20W-50',
  standard: 'API SJ',
  batch,
  containers,
  size: quart,
  price,
});
const driveOilLine = (containers: string, price: string, batch: string) => ({
  product: driveOilProduct,
  printed: `${driveOilProduct} 32 US fl oz x${containers}`,
  batch,
  containers,
  size: bottle,
  price,
});
const filterLine = { product: 'Tarn oil filter', partNumber: 'TN-2204', quantity: '1', price: '17.90' };
const ringLine = (quantity: string, price: string) => ({
  product: 'Tarn drain plug O-ring',
  partNumber: 'TN-0117',
  quantity,
  price,
});

export const sorrelPurchases: StoryPurchase[] = [
  {
    on: '2023-06-27', time: '11:20', shop: 'kestrel', number: 'K-10382', faded: 0.75, back: ['Sorrel, first service'],
    lines: [engineOilLine('5', '59.75', 'F23-118'), driveOilLine('2', '37.80', 'F23-071'), filterLine, ringLine('3', '5.40')],
  },
  {
    on: '2024-05-18', time: '10:05', shop: 'kestrel', number: 'K-14720', faded: 0.45,
    lines: [engineOilLine('5', '61.25', 'F24-090'), filterLine, ringLine('2', '3.60')],
  },
  {
    on: '2024-08-03', time: '16:42', shop: 'pickering', number: '88-2041', faded: 0.3,
    lines: [{ product: 'Tarn air filter element', partNumber: 'TN-3310', quantity: '1', price: '48.50' }],
  },
  {
    on: '2024-10-12', time: '11:20', shop: 'kestrel', number: 'K-16904', faded: 0.35, back: ['for all three', '10,238 mi'],
    lines: [engineOilLine('4', '49.80', 'F24-151'), driveOilLine('2', '39.90', 'F24-133'), filterLine, ringLine('3', '5.40'),
      { product: 'Tarn inspection cover seal', partNumber: 'TN-0440', quantity: '1', price: '9.80' }],
  },
  {
    on: '2025-05-10', time: '09:31', shop: 'pickering', number: '88-4417', faded: 0.2,
    lines: [{ product: 'Fernhill brake fluid', printed: 'Fernhill DOT 4 500 mL', grade: 'DOT 4', containers: '1', size: ['500', 'mL'], price: '11.20' }],
  },
  {
    on: '2025-12-06', time: '15:02', shop: 'kestrel', number: 'K-20418', faded: 0.15,
    lines: [engineOilLine('5', '64.75', 'F25-170'), filterLine, ringLine('2', '3.80')],
  },
  {
    on: '2026-08-08', time: '12:14', shop: 'kestrel', number: 'K-22871', faded: 0.05, back: ['Sorrel: engine, primary'],
    lines: [engineOilLine('4', '53.20', 'F26-102'), driveOilLine('2', '43.50', 'F26-088'), filterLine, ringLine('3', '6.00'),
      { product: 'Tarn inspection cover seal', partNumber: 'TN-0440', quantity: '1', price: '10.40' }],
  },
]; // prettier-ignore

const engineOil = (options: { topUp: string; torque: string; grade: string; note: string }): StoryTask => ({
  key: 'engine-oil',
  fill: {
    point: 'engine', kind: 'wet', product: engineOilProduct, grade: 'SAE 20W-50',
    amounts: [['4.25', '[qt_us]', 'first'], [options.topUp, '[qt_us]', 'top-up']],
  },
  torques: [['engine-drain', options.torque, '[ft_i].[lbf_av]']],
  inspections: [['Magnet on the engine drain plug', options.grade, options.note]],
  parts: [['Tarn oil filter', 'TN-2204', '1'], ['Tarn drain plug O-ring', 'TN-0117', '1']],
  level: ['engine', 'upright', 'hot', 'between the marks'],
}); // prettier-ignore
const primary = (torque: string, hasSeal: boolean): StoryTask => ({
  key: 'primary',
  fill: { point: 'primary', kind: 'wet', product: driveOilProduct, amounts: [['30', '[foz_us]', 'first']] },
  torques: [['primary-drain', torque, '[ft_i].[lbf_av]'], ['clutch-inspection-cover', '96', '[in_i].[lbf_av]']],
  inspections: [['Magnet on the primary chaincase drain plug', '1', 'fine grey fuzz']],
  parts: [['Tarn drain plug O-ring', 'TN-0117', '1'], ...(hasSeal ? [['Tarn inspection cover seal', 'TN-0440', '1'] as [string, string, string]] : [])],
  level: ['primary', 'upright', 'warm', 'at the lower edge of the pressure plate'],
}); // prettier-ignore
const gearbox = (torque: string): StoryTask => ({
  key: 'gearbox',
  fill: {
    point: 'gearbox', kind: 'wet', product: driveOilProduct,
    amounts: [['27', '[foz_us]', 'first'], ['1', '[foz_us]', 'top-up']],
  },
  torques: [['gearbox-drain', torque, '[ft_i].[lbf_av]']],
  inspections: [['Magnet on the gearbox drain plug', '0', null]],
  parts: [['Tarn drain plug O-ring', 'TN-0117', '1']],
  level: ['gearbox', 'on the side stand', 'warm', 'at the upper mark'],
}); // prettier-ignore
const look = (key: string, subject: string, note: string): StoryTask => ({
  key,
  inspections: [[subject, null, note]],
});
const tyreLook = [look('tyres', 'Front tyre', '36 psi cold, even wear')];
const springLook: StoryTask[] = [
  ...tyreLook,
  look('battery', 'Battery, terminals and voltage', '12.8 V after a night, terminals dry'),
  look('cables', 'Cables, free play and run', 'free play 1/16 in, no chafing'),
  look('brake-pads', 'Front and rear pads', 'more than half left all round'),
];
const oilPhotos = (grade: number) => [
  { role: 'odometer' as const },
  { role: 'magnet' as const, grade, caption: 'Engine drain plug, before wiping' },
  { role: 'as-left' as const, caption: 'Engine drain plug, torqued and marked' },
];

export const sorrelWorks: StoryWork[] = [
  {
    on: '2023-07-02', from: '09:10', to: '12:40', odometer: '1004', title: 'First service: engine oil, primary and gearbox',
    tasks: [engineOil({ topUp: '0.25', torque: '18', grade: '2', note: 'heavy grey paste, running-in' }), primary('18', false), gearbox('18'),
      { key: 'free', title: 'Fasteners', item: 'fasteners', action: 'tighten', inspections: [['Fasteners as listed', null, 'all at their mark, none moved']] }],
    photos: oilPhotos(2),
  },
  { on: '2023-09-16', from: '14:00', to: '15:10', odometer: '3208',
    tasks: [look('drive-belt', 'Drive belt and pulleys', 'no stones, edges clean'), look('air-filter', 'Air filter element', 'light dust, blown out')], photos: [{ role: 'odometer' }] },
  { on: '2023-11-04', from: '10:30', to: '11:15', odometer: '4310', title: 'Laid up for the winter',
    tasks: [look('battery', 'Battery, terminals and voltage', 'on the maintainer from today'), { key: 'free', title: 'Tank filled, stabiliser added' }], photos: [{ role: 'odometer' }] },
  { on: '2024-03-24', from: '13:05', to: '14:20', odometer: '4352', title: 'Spring look', tasks: springLook, photos: [{ role: 'odometer' }] },
  { on: '2024-05-25', from: '10:00', to: '11:35', odometer: '5340',
    tasks: [engineOil({ topUp: '0.25', torque: '20', grade: '1', note: 'fine grey fuzz' })], photos: oilPhotos(1),
    sealed: { on: '2024-06-13', time: '20:12' }, notes: 'Photos and figures noted on the day; sealed after the holidays.' },
  { on: '2024-06-22', from: '18:00', to: '18:40', odometer: '6120', tasks: [look('drive-belt', 'Drive belt and pulleys', 'tension at the middle of the window')], photos: [{ role: 'odometer' }] },
  { on: '2024-08-11', from: '09:45', to: '10:20', odometer: '8044', title: 'Air filter, pads, battery, cables, steering head',
    tasks: [{ key: 'air-filter', action: 'replace', inspections: [['Air filter element', null, 'old one oily at the edge, replaced']], parts: [['Tarn air filter element', 'TN-3310', '1']] },
      look('brake-pads', 'Front and rear pads', 'front 4.1 mm, rear 3.8 mm'), look('battery', 'Battery, terminals and voltage', '12.7 V'), look('cables', 'Cables, free play and run', 'no chafing'), look('steering-head', 'Steering head', 'no play, no notch')],
    photos: [{ role: 'odometer' }, { role: 'part', name: 'Air filter element', number: 'TN-3310' }] },
  { on: '2024-09-21', from: '15:00', to: '16:30', odometer: '9120', title: 'Rear tyre, by Halyard Cycle Works', by: 'shop', workOrder: 'HCW-2409-31',
    tasks: [{ key: 'free', title: 'Rear tyre replaced and balanced', item: 'tyres', action: 'replace', inspections: [['Rear tyre date code', null, '2224']] }], photos: [{ role: 'odometer' }] },
  { on: '2024-10-19', from: '14:10', to: '15:53', odometer: '10238', title: 'Engine oil, primary and gearbox',
    tasks: [engineOil({ topUp: '0.25', torque: '20', grade: '1', note: 'fine grey fuzz' }), primary('19', true), gearbox('20'),
      look('drive-belt', 'Drive belt and pulleys', 'clean, tension unchanged'), look('air-filter', 'Air filter element', 'clean')], photos: oilPhotos(1) },
  { on: '2024-11-16', from: '11:00', to: '11:30', odometer: '10402', title: 'Laid up for the winter', tasks: [look('battery', 'Battery, terminals and voltage', 'on the maintainer')], photos: [{ role: 'odometer' }] },
  { on: '2025-03-29', from: '12:30', to: '13:50', odometer: '10466', title: 'Spring look', tasks: springLook, photos: [{ role: 'odometer' }], withHelper: true },
  { on: '2025-05-17', from: '09:00', to: '11:20', odometer: '11870', title: 'Brake and clutch fluid',
    tasks: [
      { key: 'front-brake', title: 'Front brake fluid', item: 'front-brake-fluid', fill: { point: 'front-brake', kind: 'wet', product: 'Fernhill brake fluid', grade: 'DOT 4', amounts: [['140', 'mL', 'first']] }, level: ['front-brake', 'bars straight', 'cold', 'at the upper mark'] },
      { key: 'rear-brake', fill: { point: 'rear-brake', kind: 'wet', product: 'Fernhill brake fluid', grade: 'DOT 4', amounts: [['110', 'mL', 'first']] }, level: ['rear-brake', 'upright', 'cold', 'at the upper mark'] },
      { key: 'clutch-fluid', fill: { point: 'clutch', kind: 'wet', product: 'Fernhill brake fluid', grade: 'DOT 4', amounts: [['90', 'mL', 'first']] }, level: ['clutch', 'bars straight', 'cold', 'at the upper mark'] },
    ], photos: [{ role: 'odometer' }] },
  { on: '2025-06-28', from: '10:15', to: '12:05', odometer: '13102', title: 'Front brake pads',
    tasks: [{ key: 'front-brake', title: 'Front brake pads', item: 'brake-pads', inspections: [['Front pads and discs', null, '1.2 mm left, discs smooth']], parts: [['Tarn front brake pads', 'TN-5102', '2']] }],
    photos: [{ role: 'odometer' }, { role: 'part', name: 'Front brake pads', number: 'TN-5102' }], notes: 'Pads from the drawer, bought with the tyre in 2024; that paper is gone.' },
  { on: '2025-08-02', from: '17:20', to: '18:25', odometer: '14366', tasks: [look('drive-belt', 'Drive belt and pulleys', 'one stone mark, no tear'), look('air-filter', 'Air filter element', 'clean'), ...tyreLook], photos: [{ role: 'odometer' }] },
  { on: '2025-12-20', from: '13:40', to: '15:05', odometer: '15127',
    tasks: [engineOil({ topUp: '0.25', torque: '19', grade: '1', note: 'fine grey fuzz' })], photos: oilPhotos(1) },
  { on: '2026-03-21', from: '12:00', to: '13:10', odometer: '15180', title: 'Spring look', tasks: [...springLook, look('steering-head', 'Steering head', 'no play, no notch')], photos: [{ role: 'odometer' }], withHelper: true },
  { on: '2026-05-02', from: '09:30', to: '11:00', odometer: '16904', title: 'Front tyre, by Halyard Cycle Works', by: 'shop', workOrder: 'HCW-2605-02',
    tasks: [{ key: 'free', title: 'Front tyre replaced and balanced', item: 'tyres', action: 'replace', inspections: [['Front tyre date code', null, '0826']] }], photos: [{ role: 'odometer' }] },
  { on: '2026-06-20', from: '10:10', to: '11:30', odometer: '18455', title: 'Summer look: belt, air filter, tyres, pads', tasks: [look('drive-belt', 'Drive belt and pulleys', 'tension at the middle of the window'), look('air-filter', 'Air filter element', 'dusty, blown out'), ...springLook], photos: [{ role: 'odometer' }] },
  { on: '2026-08-15', from: '09:20', to: '12:10', odometer: '19690', title: 'Engine oil and primary',
    tasks: [engineOil({ topUp: '0.25', torque: '20', grade: '1', note: 'fine grey fuzz' }), primary('20', true)], photos: oilPhotos(1) },
  { on: '2026-10-31', from: '11:10', to: '11:50', odometer: '21340', tasks: [look('brake-pads', 'Front and rear pads', 'front 3.4 mm, rear 2.9 mm'), look('battery', 'Battery, terminals and voltage', '12.7 V')], photos: [{ role: 'odometer' }] },
]; // prettier-ignore

export const sorrelCountersignatures: StoryCountersignature[] = [
  { on: '2023-07-05', time: '17:30', of: '2023-07-02', capacity: 'inspected', statement: 'Looked over the finished work on the stand: levels, plugs and marks as written.' },
  { on: '2024-10-24', time: '16:05', of: '2024-10-19', capacity: 'inspected', statement: 'Checked levels and the marks on all three drain plugs. Dry, as written.' },
  { on: '2026-05-02', time: '16:40', of: '2026-05-02', capacity: 'did-the-work', statement: 'Fitted and balanced the front tyre under work order HCW-2605-02.' },
]; // prettier-ignore

import type { StoryPurchase, StoryWork } from './story-types';

export const wrenPurchases: StoryPurchase[] = [
  {
    on: '2024-05-04', time: '11:48', shop: 'pickering', number: '88-1702', faded: 0.4,
    lines: [{ product: 'Fernhill Single 10W-40', printed: 'Fernhill Single 10W-40 1 L x2', grade: 'SAE 10W-40', standard: 'JASO MA2 (2016)', batch: 'S24-031', containers: '2', size: ['1', 'L'], price: '23.80' },
      { product: 'Tarn oil filter', partNumber: 'TN-1108', quantity: '1', price: '8.90' }],
  },
  {
    on: '2025-04-26', time: '10:22', shop: 'pickering', number: '88-4290', faded: 0.2,
    lines: [{ product: 'Fernhill Single 10W-40', printed: 'Fernhill Single 10W-40 1 L x2', grade: 'SAE 10W-40', standard: 'JASO MA2 (2016)', batch: 'S25-027', containers: '2', size: ['1', 'L'], price: '24.60' },
      { product: 'Tarn oil filter', partNumber: 'TN-1108', quantity: '1', price: '9.20' }],
  },
]; // prettier-ignore

const oil = (title: string): StoryWork['tasks'][number] => ({
  key: 'free',
  title,
  action: 'replace',
  fill: {
    point: 'engine', kind: 'wet', product: 'Fernhill Single 10W-40', grade: 'SAE 10W-40',
    amounts: [['1.4', 'L', 'first'], ['0.1', 'L', 'top-up']],
  },
  torques: [['drain-plug', '25', 'N.m']],
  inspections: [['Magnet on the drain plug', '1', 'fine grey fuzz']],
  parts: [['Tarn oil filter', 'TN-1108', '1']],
}); // prettier-ignore

export const wrenWorks: StoryWork[] = [
  { on: '2024-05-11', from: '10:20', to: '11:10', odometer: '612', title: 'First service', tasks: [oil('Engine oil and filter')],
    photos: [{ role: 'odometer' }, { role: 'magnet', grade: 1, caption: 'Drain plug, before wiping' }] },
  // Logged on the other machine first, and struck there (story-later.ts).
  { on: '2025-05-03', from: '15:15', to: '16:05', sealed: { on: '2025-05-03', time: '16:58' }, odometer: '3480', tasks: [oil('Engine oil and filter')],
    photos: [{ role: 'odometer' }, { role: 'magnet', grade: 1, caption: 'Drain plug, before wiping' }] },
  { on: '2026-04-11', from: '09:00', to: '09:40', odometer: '5215', title: 'Chain and sprockets',
    tasks: [{ key: 'free', title: 'Chain cleaned, slack set', action: 'adjust', inspections: [['Chain slack', null, '35 mm in the middle']] }], photos: [{ role: 'odometer' }] },
]; // prettier-ignore

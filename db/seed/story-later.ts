import type { StoryAddendum, StoryStrike, StoryWork } from './story-types';

/** The Wren's oil change, sealed on the Sorrel by mistake a quarter of an hour before it was sealed where it belongs. */
export const wrongMachineWork: StoryWork = {
  on: '2025-05-03', from: '15:15', to: '16:05', odometer: '', odometerUnknown: 'Not read; the ignition was off.',
  title: 'Engine oil and filter',
  tasks: [{
    key: 'free', title: 'Engine oil and filter', item: 'engine-oil', action: 'replace',
    fill: { point: 'engine', kind: 'wet', product: 'Fernhill Single 10W-40', grade: 'SAE 10W-40', amounts: [['1.4', 'L', 'first'], ['0.1', 'L', 'top-up']] },
    parts: [['Tarn oil filter', 'TN-1108', '1']],
  }],
  photos: [{ role: 'magnet', grade: 1, caption: 'Drain plug, before wiping' }],
}; // prettier-ignore

export const sorrelStrikes: StoryStrike[] = [
  {
    on: '2025-05-03',
    time: '16:41',
    of: '2025-05-03',
    reason: 'Logged on the wrong machine: this was the Wren 300. It is sealed there; oil and filter are drawn there.',
  },
];

export const sorrelAddenda: StoryAddendum[] = [
  {
    on: '2026-08-16',
    time: '10:20',
    of: '2026-08-15',
    text: 'Checked hot after the first ride, 31 mi: level at the upper mark, drain plugs dry, marks unmoved.',
    photo: { role: 'as-left', caption: 'Engine drain plug, the day after' },
  },
];

import type { StoryWork } from './story-types';

/** Begun and interrupted: drained, not refilled. It waits on the bench. */
export const openGearboxWork: StoryWork = {
  on: '2026-11-21',
  from: '15:40',
  to: '16:25',
  odometer: '21480',
  title: 'Gearbox oil early, drain plug was weeping',
  stoppedAfter: 'look-at-magnet',
  tasks: [
    {
      key: 'gearbox',
      inspections: [['Magnet on the gearbox drain plug', '1', 'fine grey fuzz']],
    },
  ],
  photos: [{ role: 'magnet', grade: 1, caption: 'Gearbox drain plug, before wiping' }],
};

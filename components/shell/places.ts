import { paths } from '@/lib/paths';

export type Place =
  | 'bench'
  | 'record'
  | 'schedule'
  | 'spec-sheet'
  | 'shelf'
  | 'proof'
  | 'worksheet'
  | 'receipt'
  | 'account'
  | 'steward'
  | 'shop';

export interface PlaceLink {
  place: Place;
  text: string;
  href: string;
}

interface Where {
  machine?: { id: string } | undefined;
  /** Id of the shelf; without one there is no link to it. */
  shelf?: string | undefined;
}

const shelfLink = (shelf: string | undefined): PlaceLink[] =>
  shelf === undefined ? [] : [{ place: 'shelf', text: 'Shelf', href: paths.shelf(shelf) }];

/** Places of the spine, in the order of the work. */
export function spinePlaces({ machine, shelf }: Where): PlaceLink[] {
  if (!machine) return [{ place: 'bench', text: 'Bench', href: paths.start }, ...shelfLink(shelf)];
  return [
    { place: 'bench', text: 'Bench', href: paths.bench(machine.id) },
    { place: 'record', text: 'Record', href: paths.record(machine.id) },
    { place: 'schedule', text: 'Schedule', href: paths.schedule(machine.id) },
    { place: 'spec-sheet', text: 'Spec sheet', href: paths.specSheet(machine.id) },
    ...shelfLink(shelf),
    { place: 'proof', text: 'Proof', href: paths.proof(machine.id) },
  ];
}

/** The phone's bar: what is wanted in the garage and at the parts counter. */
export function barPlaces({ machine }: Where): PlaceLink[] {
  return [
    { place: 'bench', text: 'Bench', href: machine ? paths.bench(machine.id) : paths.start },
    { place: 'worksheet', text: 'Worksheet', href: paths.garage },
    { place: 'receipt', text: 'Receipt', href: paths.newReceipt },
    { place: 'record', text: 'Record', href: machine ? paths.record(machine.id) : paths.start },
  ];
}

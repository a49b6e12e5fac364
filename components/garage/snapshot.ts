import type { Lot } from '@/lib/domain/shelf';
import type { Odometer, TermsBody, UnitCode } from '@/lib/evidence/format';
import type { DraftKind } from './draft-store';

/** One line of what is due, in the server's words as of the picture's time. */
export interface GarageDue {
  item: string;
  title: string;
  words: string;
  isDue: boolean;
}
export interface GarageMachine {
  id: string;
  name: string;
  /** Whether this person may seal, or only fill in. */
  relation: 'owner' | 'helper';
  timeZone: string;
  terms: TermsBody | null;
  termsSeq: number | null;
  odometerUnit: UnitCode;
  lastReading: (Odometer & { on: string }) | null;
  due: GarageDue[];
}
export interface GarageShelf {
  id: string;
  name: string;
  lots: Lot[];
}
export interface GarageDraft {
  id: string;
  kind: DraftKind;
  subject: string;
  changedAt: string;
  title: string;
}
export interface GaragePerson {
  id: string;
  name: string;
  isSteward: boolean;
  distanceUnit: UnitCode;
  volumeUnit: UnitCode;
  torqueUnit: UnitCode;
  timeZone: string;
}

/** What the server last told this device: enough to work without signal. */
export interface GarageSnapshot {
  person: GaragePerson;
  machines: GarageMachine[];
  shelves: GarageShelf[];
  drafts: GarageDraft[];
  demo: 'none' | 'demo' | 'demo-times-injected';
}

const list = <T>(value: unknown): Partial<T>[] => (Array.isArray(value) ? (value as Partial<T>[]) : []);

/**
 * The server's answer, or one kept by an earlier version of this page, as this version needs it. Undefined when it
 * names no person: then it is no picture of anybody's garage.
 */
export function snapshotFrom(value: unknown): GarageSnapshot | undefined {
  if (typeof value !== 'object' || value === null) return undefined;
  const given = value as Partial<Record<keyof GarageSnapshot, unknown>>;
  const person = (given.person ?? {}) as Partial<GaragePerson>;
  if (typeof person.id !== 'string') return undefined;
  return {
    person: {
      name: '', isSteward: false, distanceUnit: 'km', volumeUnit: 'L', torqueUnit: 'N.m', timeZone: 'UTC',
      ...person, id: person.id,
    }, // prettier-ignore
    machines: list<GarageMachine>(given.machines).map((machine) => ({
      id: '', name: '', relation: 'owner', timeZone: person.timeZone ?? 'UTC', terms: null, termsSeq: null,
      odometerUnit: 'km', lastReading: null, ...machine, due: list<GarageDue>(machine.due).map((due) => ({
        item: '', title: '', words: '', isDue: false, ...due,
      })),
    })), // prettier-ignore
    shelves: list<GarageShelf>(given.shelves).map((shelf) => ({
      id: '', name: '', ...shelf, lots: list<Lot>(shelf.lots) as Lot[],
    })), // prettier-ignore
    drafts: list<GarageDraft>(given.drafts).map((draft) => ({
      id: '', kind: 'worksheet', subject: '', changedAt: '', title: '', ...draft,
    })), // prettier-ignore
    demo: given.demo === 'demo' || given.demo === 'demo-times-injected' ? given.demo : 'none',
  };
}

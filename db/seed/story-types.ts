import type { UnitCode } from '@/lib/evidence/format';

/** A purchase as the till printed it. */
export interface StoryPurchase {
  on: string;
  time: string;
  shop: keyof typeof shops;
  number: string;
  lines: StoryLine[];
  /** 0 fresh to 1 faded. */
  faded: number;
  /** What the rider wrote on the back. */
  back?: string[];
}
export interface StoryLine {
  product: string;
  /** What the till prints, if shorter. */
  printed?: string;
  grade?: string;
  standard?: string;
  partNumber?: string;
  batch?: string;
  containers?: string;
  size?: readonly [string, UnitCode];
  quantity?: string;
  price: string;
}

export interface StoryTask {
  /** A procedure's key, or `free`. */
  key: string;
  title?: string;
  item?: string;
  action?: string;
  fill?: {
    point: string;
    kind: 'wet' | 'dry';
    product: string;
    grade?: string;
    amounts: [string, UnitCode, 'first' | 'top-up'][];
  };
  torques?: [fastener: string, amount: string, unit: UnitCode][];
  inspections?: [subject: string, grade: string | null, note: string | null][];
  parts?: [name: string, partNumber: string, quantity: string][];
  level?: [point: string, position: string, temperature: string, reading: string];
}

export interface StoryWork {
  on: string;
  from: string;
  to: string;
  odometer: string;
  /** Why no odometer was read, in place of a figure. */
  odometerUnknown?: string;
  title?: string;
  tasks: StoryTask[];
  photos: StoryPhoto[];
  notes?: string;
  /** When it was sealed, if not twenty minutes after the work. */
  sealed?: { on: string; time: string };
  /** Interrupted after this hold point, and so never sealed. */
  stoppedAfter?: string;
  /** Joost filled in some of it. */
  withHelper?: boolean;
  /** Work by others, with the number on their paper. */
  workOrder?: string;
  by?: 'shop' | 'dealer';
}
export type StoryPhoto =
  | { role: 'odometer' }
  | { role: 'magnet'; grade: number; caption: string }
  | { role: 'as-left'; caption: string }
  | { role: 'part'; name: string; number: string };

export interface StoryCountersignature {
  on: string;
  time: string;
  /** Finds the service by its day. */
  of: string;
  capacity: 'did-the-work' | 'inspected' | 'was-present' | 'checked-papers';
  statement: string;
}

/** An entry withdrawn, found by the day of its work. */
export interface StoryStrike {
  on: string;
  time: string;
  of: string;
  reason: string;
}
/** What was added to an entry later, found by the day of its work. */
export interface StoryAddendum {
  on: string;
  time: string;
  of: string;
  text: string;
  photo: StoryPhoto & { caption: string };
}

export const shops = {
  kestrel: { name: 'Kestrel Road Parts', address: '18 Kestrel Road, Millbrook' },
  pickering: { name: 'Pickering Motor Supply', address: '204 Dale Street, Millbrook' },
  halyard: { name: 'Halyard Cycle Works', address: '3 Ropewalk, Millbrook' },
} as const;

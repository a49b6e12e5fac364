import type { ScheduleItem } from '@/lib/evidence/format';

/** One hold point: the work waits here until it is done. */
export interface HoldPoint {
  key: string;
  title: string;
  /** What to do, in a sentence or two. */
  text: string;
  /** Where work can hurt somebody or the machine. */
  caution?: string;
  /** What this point asks to be entered beside the tick. */
  records?: { fill?: string; torque?: string; inspection?: string; part?: string; levelCheck?: string };
  /** States the machine is in from here until a later point ends it; shown on the bench when work stops. */
  leaves?: { state: string; until: string };
}
export interface InspectionPoint {
  subject: string;
  /** `debris`: grades 0 to 4; `words`: free words. */
  kind: 'debris' | 'words';
}
export interface Procedure {
  key: string;
  title: string;
  action: ScheduleItem['action'];
  /** Schedule items this work does. */
  scheduleItems: string[];
  holdPoints: HoldPoint[];
  /** Keys into the spec sheet. */
  fluidPoints: string[];
  fasteners: string[];
  parts: string[];
  inspections: InspectionPoint[];
  levelChecks: string[];
}

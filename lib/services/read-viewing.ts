import 'server-only';
import { machineById } from '@/db/queries/machines';
import type { MachineRow } from '@/db/models/machines';
import type { PersonRow } from '@/db/models/people';
import { authorise } from '@/lib/auth/guard';
import { localDateOf } from '@/lib/domain/instants';
import type { Scope } from '@/lib/domain/scope';
import { readScope } from '@/lib/domain/stored-scope';
import { notFound } from '@/lib/errors';
import { areTimesInjected } from '@/lib/packet/content';
import { summarise, type PacketSummary } from '@/lib/packet/summary';
import { now } from '@/lib/ports/clock';
import { distanceRule, timeRule, type RuleData } from '@/lib/services/bench-rule';
import { offeredPacket } from '@/lib/services/offered-packet';
import { openedHistory } from '@/lib/services/opened-history';
import { readViewingLink } from '@/lib/services/open-viewing-link';
import { readRecord } from '@/lib/services/read-record';
import type { RecordView } from '@/lib/services/record-view';
import { doneServices, whatIsDue } from '@/lib/services/what-is-due';

interface CameBy {
  /** Id of the viewing link. */
  id: string;
  /** This browser came with the link's secret address. */
  cameByAddress: boolean;
}

/** What a reader sees of a record, whether through a link or, before there is one, as its owner. */
export interface Shown {
  record: RecordView;
  /** The machine's time zone: instants are written in it. */
  zone: string;
  timesInjected: boolean;
  /** UTC instant of this reading: everything computed is said as of then. */
  readAt: string;
  summary: PacketSummary;
  rules: RuleData[];
}

export interface ViewedRecord extends Pick<Shown, 'record' | 'zone' | 'timesInjected'> {
  /** Id of the viewing link. */
  link: string;
  expiresAt: string | null;
}

export interface Viewing extends Shown, ViewedRecord {
  /** The newest packet that this link may hand out, if any. */
  packet: { number: string; bytes: number | null; pages: number | null; logSize: number | null } | null;
}

/** The record behind a viewing link. Throws `not-found`, or `gone` once the link was revoked or ran out. */
export async function readViewedRecord(cameBy: CameBy): Promise<ViewedRecord> {
  const link = await readViewingLink(cameBy);
  const machine = await machineOf(link.machineId);
  const record = await readRecord({ machineId: machine.id, scope: readScope(link.scope) });
  const timesInjected = areTimesInjected(record);
  return { link: link.id, expiresAt: link.expiresAt, record, zone: machine.timeZone, timesInjected };
}

/** What a viewing link's first page shows: the record, what it amounts to, and how the schedule and warranty stand. */
export async function readViewing(cameBy: CameBy): Promise<Viewing> {
  const link = await readViewingLink(cameBy);
  const machine = await machineOf(link.machineId);
  const [shown, packet] = await Promise.all([showTo(machine, readScope(link.scope)), offeredPacket(link)]);
  return { ...shown, link: link.id, expiresAt: link.expiresAt, packet };
}

/** What a reader would see with a scope, for the machine's owner before anything is shared. */
export async function previewViewing(options: { person: PersonRow; machineId: string; scope: Scope }): Promise<Shown> {
  const { person, machineId, scope } = options;
  await authorise({ person, action: 'share', machine: machineId });
  return showTo(await machineOf(machineId), scope);
}

async function showTo(machine: MachineRow, scope: Scope): Promise<Shown> {
  const record = await readRecord({ machineId: machine.id, scope });
  const zone = machine.timeZone;
  const readAt = now().toISOString();
  const summary = summarise({ record, madeAt: readAt, zone });
  return { record, zone, timesInjected: areTimesInjected(record), readAt, summary, rules: rulesOf(machine, { record, summary, readAt }) }; // prettier-ignore
}

/** With something withheld that may be work or a reading, no rule is drawn: its limits would be guesses. */
function rulesOf(machine: MachineRow, { record, summary, readAt }: Pick<Shown, 'record' | 'summary' | 'readAt'>) {
  if (summary.opened.unjudged > 0) return [];
  const history = openedHistory(record, summary);
  const due = whatIsDue(machine, history);
  const done = doneServices(history.services);
  const today = localDateOf(readAt, machine.timeZone);
  const context = { machine, history, due, done, warranty: summary.warranty, today };
  return [distanceRule(context), timeRule(context)].filter((rule) => rule !== null);
}

async function machineOf(id: string): Promise<MachineRow> {
  const machine = await machineById(id);
  if (machine === null) throw notFound('viewing link');
  return machine;
}

import 'server-only';
import { machineById } from '@/db/queries/machines';
import { newestReadyPacket } from '@/db/queries/viewing-links';
import type { MachineRow } from '@/db/models/machines';
import { localDateOf } from '@/lib/domain/instants';
import { warrantyState, type WarrantyState } from '@/lib/domain/warranty';
import { notFound } from '@/lib/errors';
import { areTimesInjected } from '@/lib/packet/content';
import { summarise, type PacketSummary } from '@/lib/packet/summary';
import { now } from '@/lib/ports/clock';
import { distanceRule, timeRule, type RuleData } from '@/lib/services/bench-rule';
import { readViewingLink } from '@/lib/services/open-viewing-link';
import { readHistory } from '@/lib/services/read-history';
import { openPacketFile } from '@/lib/services/read-packet';
import { readRecord } from '@/lib/services/read-record';
import type { RecordView } from '@/lib/services/record-view';
import { doneServices, whatIsDue } from '@/lib/services/what-is-due';

interface CameBy {
  /** Id of the viewing link. */
  id: string;
  /** This browser came with the link's secret address. */
  cameByAddress: boolean;
}

export interface ViewedRecord {
  /** Id of the viewing link. */
  link: string;
  expiresAt: string | null;
  record: RecordView;
  /** The machine's time zone: instants are written in it. */
  zone: string;
  timesInjected: boolean;
}

export interface Viewing extends ViewedRecord {
  /** UTC instant of this reading: everything computed is said as of then. */
  readAt: string;
  summary: PacketSummary;
  warranty: WarrantyState[];
  rules: RuleData[];
  /** The newest packet that is ready, if any. */
  packet: { number: string; bytes: number | null; pages: number | null; logSize: number | null } | null;
}

/** The record behind a viewing link. Throws `not-found`, or `gone` once the link was revoked or ran out. */
export async function readViewedRecord(cameBy: CameBy): Promise<ViewedRecord> {
  const { viewed } = await viewedMachine(cameBy);
  return viewed;
}

/** What a viewing link's first page shows: the record, what it amounts to, and how the schedule and warranty stand. */
export async function readViewing(cameBy: CameBy): Promise<Viewing> {
  const { viewed, machine } = await viewedMachine(cameBy);
  const { record, zone } = viewed;
  const readAt = now().toISOString();
  const [history, packet] = await Promise.all([readHistory(machine.id), newestReadyPacket(machine.id)]);
  const warranty = (history.terms?.warranty ?? []).map((term) =>
    warrantyState(term, history.readings, { now: readAt, zone }),
  );
  const due = whatIsDue(machine, history);
  const done = doneServices(history.services);
  const context = { machine, history, due, done, warranty, today: localDateOf(readAt, zone) };
  return {
    ...viewed,
    readAt,
    summary: summarise({ record, madeAt: readAt, zone }),
    warranty,
    rules: [distanceRule(context), timeRule(context)].filter((rule) => rule !== null),
    packet,
  };
}

/** The newest packet of a machine, for whoever may read its record. Throws `not-found` if none is ready. */
export async function openNewestPacket({ machineId }: { machineId: string }) {
  const packet = await newestReadyPacket(machineId);
  if (packet === null) throw notFound('packet');
  return openPacketFile(packet);
}

async function viewedMachine(cameBy: CameBy): Promise<{ viewed: ViewedRecord; machine: MachineRow }> {
  const link = await readViewingLink(cameBy);
  const machine = await machineById(link.machineId);
  if (machine === null) throw notFound('viewing link');
  const record = await readRecord({ machineId: machine.id });
  return {
    machine,
    viewed: {
      link: link.id,
      expiresAt: link.expiresAt,
      record,
      zone: machine.timeZone,
      timesInjected: areTimesInjected(record),
    },
  };
}

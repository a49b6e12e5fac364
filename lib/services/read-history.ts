import 'server-only';
import type { Transaction } from '@/db/index';
import { findLogOf } from '@/db/queries/logs';
import { linesOf, standingLines, type LogLine } from '@/db/queries/lots';
import type { OdometerReading } from '@/lib/domain/odometer';
import type { Attachment, Odometer, OpeningBody, ServiceBody, TermsBody } from '@/lib/evidence/format';
import { notFound } from '@/lib/errors';
import { openedPart } from './opened-part';

export interface SealedService {
  seq: number;
  leafHash: string;
  sealedAt: string;
  body: ServiceBody;
  attachments: Attachment[];
}
/** What a machine's log says so far, struck entries left out. */
export interface SealedHistory {
  log: string;
  opening: OpeningBody;
  terms: TermsBody | null;
  termsSeq: number | null;
  services: SealedService[];
  /** From the opening, from services and from readings, in the order they were sealed. */
  readings: OdometerReading[];
}

/** Reads a machine's log; inside a transaction when one is given, so that a seal judges what it follows. */
export async function readHistory(machine: string, transaction?: Transaction): Promise<SealedHistory> {
  const log = await findLogOf(machine, transaction ? { transaction } : {});
  if (log === null) throw notFound('machine');
  return historyOf(log.id, await linesOf(log.id, transaction));
}

/** The same from lines that were read already, or that might come to be. Throws `not-found` without an opening. */
export function historyOf(log: string, lines: readonly LogLine[]): SealedHistory {
  const standing = standingLines(lines);
  const opening = lines[0] && openedPart<OpeningBody>(lines[0], 'body');
  if (opening === undefined) throw notFound('machine');
  const services = standing.flatMap(serviceOf);
  const terms = standing.findLast((line) => line.entry.kind === 'terms' && line.parts.has('body'));
  return {
    log,
    opening,
    terms: (terms && openedPart<TermsBody>(terms, 'body')) ?? null,
    termsSeq: terms?.entry.seq ?? null,
    services,
    readings: [...openingReadings(opening), ...services.flatMap(serviceReading), ...standing.flatMap(plainReading)],
  };
}

function serviceOf(line: LogLine): SealedService[] {
  const body = line.entry.kind === 'service' ? openedPart<ServiceBody>(line, 'body') : undefined;
  if (body === undefined) return [];
  const { seq, leafHash, sealedAt } = line.entry;
  return [{ seq, leafHash, sealedAt, body, attachments: openedPart<Attachment[]>(line, 'attachments') ?? [] }];
}

function openingReadings({ firstUse, recordStarts }: OpeningBody): OdometerReading[] {
  const first = firstUse?.on !== undefined && firstUse.odometer ? [{ ...firstUse.odometer, on: firstUse.on }] : [];
  const start = recordStarts.odometer ? [{ ...recordStarts.odometer, on: recordStarts.on }] : [];
  return firstUse?.on === recordStarts.on && first.length > 0 ? first : [...first, ...start];
}

function serviceReading({ body }: SealedService): OdometerReading[] {
  return body.odometer === undefined ? [] : [{ ...body.odometer, on: body.finishedAt.date }];
}

function plainReading(line: LogLine): OdometerReading[] {
  if (line.entry.kind !== 'reading') return [];
  const body = openedPart<{ odometer?: Odometer; on?: string | { date: string } }>(line, 'body');
  const on = typeof body?.on === 'string' ? body.on : body?.on?.date;
  return body?.odometer === undefined || on === undefined ? [] : [{ ...body.odometer, on }];
}

import 'server-only';
import { machineById } from '@/db/queries/machines';
import type { PersonRow } from '@/db/models/people';
import { authorise } from '@/lib/auth/guard';
import { notFound } from '@/lib/errors';
import type { TermsBody } from '@/lib/evidence/format';
import { machineName } from './list-machines';
import { readHistory } from './read-history';

export interface SpecSheet {
  machine: { id: string; name: string };
  termsSeq: number | null;
  terms: TermsBody | null;
  /** How many lines of fluid points, fasteners and parts there are, and how many name no manual or owner. */
  lines: number;
  commonPractice: number;
}

/** The spec sheet of the newest sealed terms, for one of the machine's people. */
export async function readSpecSheet(options: { person: PersonRow; machine: string }): Promise<SpecSheet> {
  await authorise({ person: options.person, action: 'read-machine', machine: options.machine });
  const machine = await machineById(options.machine);
  if (machine === null) throw notFound('machine');
  const { terms, termsSeq } = await readHistory(machine.id);
  const sources = [...(terms?.fluidPoints ?? []), ...(terms?.fasteners ?? []), ...(terms?.parts ?? [])];
  return {
    machine: { id: machine.id, name: machineName(machine) },
    termsSeq,
    terms,
    lines: sources.length,
    commonPractice: sources.filter(({ source }) => source.kind === 'common-practice').length,
  };
}

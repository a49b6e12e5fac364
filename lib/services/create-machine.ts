import 'server-only';
import { randomUUID } from 'node:crypto';
import { findLogOf } from '@/db/queries/logs';
import { insertMachine, machineById, machinesOf } from '@/db/queries/machines';
import type { PersonRow } from '@/db/models/people';
import { authorise } from '@/lib/auth/guard';
import { WitnessmarkError, invalidInput } from '@/lib/errors';
import type { AuthorPart, OpeningBody, TermsBody } from '@/lib/evidence/format';
import { now } from '@/lib/ports/clock';
import { appendEntry } from './append-entry';
import { ensureShelf } from './create-shelf';
import { termsForKind } from './machine-kinds';
import { readMachineInput, type MachineInput, type ReadMachine } from './machine-input';
import { openLog } from './open-log';

/** Every device of a person reads all of their machines at once. */
export const mostMachines = 100;

/**
 * Sets up a machine: its row, its owner and entry 0 in one transaction, then its terms as entry 1, and a shelf for
 * somebody who has none. Sent again, it goes on where it was interrupted and makes nothing twice.
 */
export async function createMachine(options: {
  person: PersonRow;
  input: MachineInput;
}): Promise<{ machine: string; log: string }> {
  const { person, input } = options;
  // The id is the device's: one that has a record already, be it a shelf's, is asked about like any other.
  const existing = (await machineById(input.machine)) ?? (await findLogOf(input.machine));
  if (existing !== null) await authorise({ person, action: 'set-up-machine', machine: input.machine });
  else await demandRoom(person);
  const { machine: read, refused } = readMachineInput(input, now().toISOString());
  const terms = termsForKind(input.kind);
  if (terms === undefined) refused.kind ??= 'Choose what kind of machine it is.';
  if (Object.keys(refused).length > 0 || terms === undefined) throw invalidInput(refused);

  const author: AuthorPart = { person: person.id, name: person.name, role: 'owner' };
  const { log } = await openMachineLog({ person, input, read, author });
  const body: TermsBody = { ...terms, warranty: [...terms.warranty, ...read.warranty] };
  await appendEntry({
    log,
    kind: 'terms',
    by: person.id,
    idempotencyKey: `first-terms/${input.machine}`,
    parts: () => Promise.resolve({ author, body }),
  });
  await ensureShelf(person);
  return { machine: input.machine, log };
}

async function demandRoom(person: PersonRow): Promise<void> {
  const owned = (await machinesOf(person.id)).filter(({ relation }) => relation === 'owner');
  if (owned.length < mostMachines) return;
  throw new WitnessmarkError('too-large', `You have ${owned.length} machines here, and there is room for no more.`);
}

async function openMachineLog(options: {
  person: PersonRow;
  input: MachineInput;
  read: ReadMachine;
  author: AuthorPart;
}): Promise<{ log: string }> {
  const { person, input, read, author } = options;
  const { machine: id, make, model, kind, distanceUnit, timeZone } = input;
  const { identity, opening } = read;
  const existing = await findLogOf(id);
  if (existing !== null) return { log: existing.id };
  const body: OpeningBody = { make, model, kindOfMachine: kind, ...opening };
  return openLog({
    subject: 'machine',
    subjectId: id,
    by: person.id,
    parts: () => Promise.resolve({ author, body, identity }),
    within: async (transaction) => {
      const at = now().toISOString();
      await insertMachine(
        {
          id,
          make,
          model,
          modelYear: opening.modelYear ?? null,
          kind,
          vin: identity.vin ?? null,
          frameNumber: identity.frameNumber ?? null,
          engineNumber: identity.engineNumber ?? null,
          vinCheck: read.vinCheck,
          distanceUnit,
          timeZone,
          firstUseOn: opening.firstUse?.on ?? null,
          firstUseOdometer: opening.firstUse?.odometer?.value ?? null,
          archivedAt: null,
          createdBy: person.id,
          createdAt: at,
        },
        {
          id: randomUUID(),
          personId: person.id,
          subjectKind: 'machine',
          subjectId: id,
          relation: 'owner',
          since: at,
          until: null,
        },
        transaction,
      );
    },
  });
}

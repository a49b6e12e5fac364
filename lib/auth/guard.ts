import 'server-only';
import { holdsImport } from '@/db/queries/imports';
import { findRelation, type PersonRow, type RelationRow } from '@/db/queries/people';
import { WitnessmarkError } from '@/lib/errors';
import { now } from '@/lib/ports/clock';
import { access, can, noStanding, type Action, type Standing } from './access';

interface Subjects {
  machine?: string | undefined;
  shelf?: string | undefined;
  shop?: string | undefined;
  import?: string | undefined;
}

/** What a person is, at this moment, to the things named. */
export async function standingOf(person: PersonRow, subjects: Subjects): Promise<Standing> {
  const at = now().toISOString();
  const relation = async (subjectKind: RelationRow['subjectKind'], subjectId: string | undefined) =>
    subjectId === undefined ? null : findRelation({ personId: person.id, subjectKind, subjectId, at });
  const [machine, shelf, shop, isHolder] = await Promise.all([
    relation('machine', subjects.machine),
    relation('shelf', subjects.shelf),
    relation('shop', subjects.shop),
    subjects.import === undefined ? false : holdsImport({ id: subjects.import, personId: person.id }),
  ]);
  const owned = (found: typeof machine) => (found === 'owner' || found === 'helper' ? found : 'none');
  return {
    ...noStanding,
    machine: owned(machine),
    shelf: owned(shelf),
    shop: shop === 'technician' ? shop : 'none',
    import: isHolder ? 'holder' : 'none',
    isSteward: person.isSteward,
  };
}

/**
 * Returns the person's standing if they may do this, and otherwise throws "not found": what a person may not touch
 * does not exist for them. In a page the error shows the not-found page, in a route and an action its own answer.
 *
 * @example const standing = await authorise({ person, action: 'read-machine', machine: id });
 */
export async function authorise(options: { person: PersonRow; action: Action } & Subjects): Promise<Standing> {
  const { person, action, ...subjects } = options;
  const { on } = access[action];
  if (on !== 'installation' && subjects[on] === undefined) {
    throw new Error(`"${action}" acts on a ${on}, and none was named.`);
  }
  const standing = await standingOf(person, subjects);
  if (!can(action, standing)) throw hidden(on === 'installation' ? 'page' : on === 'import' ? 'imported record' : on);
  return standing;
}

/** For pages: turns a use case's "not found" into the not-found page; every other error goes on. */
export async function orNotFound<T>(work: Promise<T>): Promise<T> {
  try {
    return await work;
  } catch (error) {
    if (error instanceof WitnessmarkError && error.code === 'not-found') throw asNextNotFound(error);
    throw error;
  }
}

function hidden(what: string): WitnessmarkError {
  return asNextNotFound(new WitnessmarkError('not-found', `There is no such ${what}, or it is not shared with you.`));
}

/**
 * By this digest Next knows an error as "not found". `next/navigation` cannot be imported here: use cases also run in
 * scripts, outside Next. A test holds the digest against the one of Next's own error.
 */
function asNextNotFound(error: WitnessmarkError): WitnessmarkError {
  return Object.assign(error, { digest: 'NEXT_HTTP_ERROR_FALLBACK;404' });
}

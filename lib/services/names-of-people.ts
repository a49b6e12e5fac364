import { isPersonId } from '@/lib/domain/person-id';
import type { AuthorPart, CountersignatureBody, ServiceBody } from '@/lib/evidence/format';

/** Finds the name that belongs to a person's id; undefined where no opened author part says it. */
export type NameOf = (person: string) => string | undefined;

/** Bodies name people by id; who that is stands in author parts alone, where it can be withheld. */
export function nameOfPeople(authors: readonly (AuthorPart | null)[]): NameOf {
  const names = new Map<string, string>();
  for (const author of authors) {
    if (author === null) continue;
    for (const { person, name } of [author, ...(author.people ?? [])]) if (!names.has(person)) names.set(person, name);
  }
  return (person) => names.get(person);
}

/** A service as people read it. Services of earlier versions name people in their body, and are left as they are. */
export function withPerformers(body: ServiceBody, nameOf: NameOf): ServiceBody {
  const performedBy = body.performedBy.map((one) => ({
    ...one,
    person: nameOf(one.person) ?? (isPersonId(one.person) ? 'Name withheld' : one.person),
  }));
  return { ...body, performedBy };
}

/** A countersignature as people read it: who invited the shop, by name or else as what they are. */
export function withInviter(body: CountersignatureBody, nameOf: NameOf): CountersignatureBody {
  const { invitedBy } = body;
  return isPersonId(invitedBy) ? { ...body, invitedBy: nameOf(invitedBy) ?? 'the owner' } : body;
}

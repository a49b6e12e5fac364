import 'server-only';
import { write } from '@/db/index';
import { updatePerson, type PersonRow } from '@/db/queries/people';

export type AccountChanges = Pick<PersonRow, 'name' | 'distanceUnit' | 'volumeUnit' | 'torqueUnit' | 'timeZone'>;

/** Names and figures sealed before keep the words and units they were sealed with. */
export async function changeAccount({
  person,
  changes,
}: {
  person: PersonRow;
  changes: AccountChanges;
}): Promise<void> {
  const { name, distanceUnit, volumeUnit, torqueUnit, timeZone } = changes;
  await write((transaction) =>
    updatePerson(person.id, { name, distanceUnit, volumeUnit, torqueUnit, timeZone }, { transaction }),
  );
}

import { redirect } from 'next/navigation';
import { requirePerson } from '@/lib/auth/session';
import { paths } from '@/lib/paths';
import { shellOf } from '@/lib/services/read-shell';

/** The bench of the first machine; a technician without one begins at the shop, anybody else by setting one up. */
export default async function StartPage() {
  const { machines, person } = await shellOf(await requirePerson());
  const [first] = machines;
  if (first !== undefined) redirect(paths.bench(first.id));
  redirect(person.shop === undefined ? paths.newMachine : paths.shop(person.shop));
}

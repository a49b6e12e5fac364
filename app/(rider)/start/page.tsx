import { redirect } from 'next/navigation';
import { requirePerson } from '@/lib/auth/session';
import { paths } from '@/lib/paths';
import { listMachines } from '@/lib/services/list-machines';

/** The bench of the first machine, or the page that sets one up. */
export default async function StartPage() {
  const person = await requirePerson();
  const [first] = await listMachines(person);
  redirect(first === undefined ? paths.newMachine : paths.bench(first.id));
}

import 'server-only';
import { randomUUID } from 'node:crypto';
import { write } from '../index';
import { people, type PersonRow } from '../models/people';
import { hashPassword } from '@/lib/auth/password';
import { now } from '@/lib/ports/clock';

/** A confirmed account, as signing up and following the mail would leave it. For the demo and for tests. */
export async function buildPerson(options: {
  email: string;
  name: string;
  password: string;
  isSteward?: boolean;
  timeZone?: string;
}): Promise<PersonRow> {
  const at = now().toISOString();
  const person: PersonRow = {
    id: randomUUID(),
    email: options.email,
    name: options.name,
    passwordHash: await hashPassword(options.password),
    emailConfirmedAt: at,
    isSteward: options.isSteward ?? false,
    distanceUnit: '[mi_i]',
    volumeUnit: '[qt_us]',
    torqueUnit: '[ft_i].[lbf_av]',
    timeZone: options.timeZone ?? 'UTC',
    createdAt: at,
  };
  await write((transaction) => people.insert(person, { transaction }));
  return person;
}

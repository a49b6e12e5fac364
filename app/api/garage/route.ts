import { route } from '@/lib/auth/route';
import { readGarage } from '@/lib/services/read-garage';

/** Everything the offline shell keeps. */
export const GET = route({ access: 'signed-in' }, async ({ person }) => Response.json(await readGarage({ person })));

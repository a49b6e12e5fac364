import { route } from '@/lib/auth/route';
import { publishedKeys } from '@/lib/services/log-keys';

export const dynamic = 'force-dynamic';

/** Every key that ever signed here, newest first: what readers check records with. */
export const GET = route({ access: 'public' }, () => Response.json({ keys: publishedKeys() }));

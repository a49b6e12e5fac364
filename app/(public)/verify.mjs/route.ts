import { route } from '@/lib/auth/route';
import { readVerifier } from '@/lib/services/read-verifier';

export const dynamic = 'force-dynamic';

export const GET = route({ access: 'public' }, async () => {
  const { bytes } = await readVerifier('verify.mjs');
  return new Response(bytes, {
    headers: {
      'content-type': 'text/javascript; charset=utf-8',
      'content-disposition': 'attachment; filename="verify.mjs"',
      'content-length': String(bytes.length),
    },
  });
});

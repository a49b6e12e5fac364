import { route } from '@/lib/auth/route';
import { readVerifier } from '@/lib/services/read-verifier';

export const dynamic = 'force-dynamic';

/** To be saved, never shown from here: opened at this address it would be one more page of this installation. */
export const GET = route({ access: 'public' }, async () => {
  const { bytes } = await readVerifier('verify.html');
  return new Response(bytes, {
    headers: {
      'content-type': 'text/html; charset=utf-8',
      'content-disposition': 'attachment; filename="verify.html"',
      'content-length': String(bytes.length),
    },
  });
});

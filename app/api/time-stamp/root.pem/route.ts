import { route } from '@/lib/auth/route';
import { ownCertificates } from '@/lib/ports/time-stamp-authority/own-certificates';

export const dynamic = 'force-dynamic';

/** The root by which the own test authority's stamps are checked. It makes them no more independent. */
export const GET = route({ access: 'public' }, () => {
  const headers = { 'content-type': 'application/x-pem-file' };
  return new Response(ownCertificates().root.toString(), { headers });
});

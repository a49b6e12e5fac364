import { route } from '@/lib/auth/route';
import { visitorAddress } from '@/lib/auth/visitor';
import { env } from '@/lib/env';
import { paths } from '@/lib/paths';
import { stopKeeping } from '@/lib/services/answer-keeper';

/** The mail program's own button (RFC 8058): it posts here, from anywhere and without a cookie. */
export const POST = route<{ token: string }>({ access: 'public', crossSite: 'allowed' }, async ({ params }) => {
  await stopKeeping({ token: params.token, address: await visitorAddress() });
  return new Response('Stopped. No more mails come.\n', { headers: { 'content-type': 'text/plain; charset=utf-8' } });
});

/** A program that only opens the address changes nothing by it; a person finds the button on the page. */
export const GET = route<{ token: string }>({ access: 'public' }, ({ params }) =>
  Response.redirect(env.url + paths.keeper(encodeURIComponent(params.token)), 303),
);

import 'server-only';
import { unstable_rethrow } from 'next/navigation';
import type { NextRequest } from 'next/server';
import type { PersonRow } from '@/db/queries/people';
import { env } from '@/lib/env';
import { WitnessmarkError, notFound } from '@/lib/errors';
import { asRefusal } from './refusal';
import { isFromOurselves } from './same-origin';
import { currentPerson } from './session';

interface Options {
  access: 'public' | 'signed-in' | 'steward';
  /** Only for what a page of another site may rightly send, such as a time-stamp request. */
  crossSite?: 'allowed';
}
interface Context<Params, Person> {
  request: NextRequest;
  person: Person;
  params: Params;
}
type Handler<Params> = (request: NextRequest, context: { params: Promise<Params> }) => Promise<Response>;

/** For routes anybody may call; `person` is whoever is signed in, if anybody. */
export function route<Params extends object = object>(
  options: Options & { access: 'public' },
  work: (context: Context<Params, PersonRow | null>) => Promise<Response> | Response,
): Handler<Params>;
/** For routes of somebody signed in. What they may do to which machine, `work` asks of `authorise`. */
export function route<Params extends object = object>(
  options: Options & { access: 'signed-in' | 'steward' },
  work: (context: Context<Params, PersonRow>) => Promise<Response> | Response,
): Handler<Params>;
export function route<Params extends object = object>(
  { access, crossSite }: Options,
  work: (context: Context<Params, PersonRow>) => Promise<Response> | Response,
): Handler<Params> {
  return async (request, context) => {
    try {
      if (crossSite !== 'allowed' && !isFromOurselves(request)) {
        throw new WitnessmarkError('cross-site', 'This was sent from another site, so nothing was done.');
      }
      const person = await currentPerson();
      if (access !== 'public' && person === null) {
        throw new WitnessmarkError('not-signed-in', 'Sign in first; what you have typed is kept on this device.');
      }
      if (access === 'steward' && person?.isSteward !== true) throw notFound();
      // The overloads promise a person wherever `access` is not public.
      const response = await work({ request, person: person as PersonRow, params: await context.params });
      return withHeaders(response);
    } catch (error) {
      // Our own "not found" also carries Next's digest, but a route answers it as problem JSON.
      if (!(error instanceof WitnessmarkError)) unstable_rethrow(error);
      return withHeaders(problem(asRefusal(error)));
    }
  };
}

/** RFC 9457: a refusal for a program. */
export function problem(refusal: WitnessmarkError): Response {
  return new Response(JSON.stringify(refusal.toProblem()), {
    status: refusal.status,
    headers: { 'content-type': 'application/problem+json' },
  });
}

/** The proxy does not stand before /api, so its headers are set here. A handler's own choice is left alone. */
function withHeaders(response: Response): Response {
  const headers = new Headers(response.headers);
  const setIfAbsent = (name: string, value: string) => {
    if (!headers.has(name)) headers.set(name, value);
  };
  setIfAbsent('cache-control', 'private, no-store');
  setIfAbsent('x-content-type-options', 'nosniff');
  setIfAbsent('referrer-policy', 'same-origin');
  setIfAbsent('cross-origin-resource-policy', 'same-origin');
  if (/json|^text\//.test(headers.get('content-type') ?? '')) {
    setIfAbsent('content-security-policy', "default-src 'none'; frame-ancestors 'none'");
  }
  if (env.isSecure) setIfAbsent('strict-transport-security', 'max-age=63072000');
  const { status, statusText } = response;
  return new Response(response.body, { status, statusText, headers });
}

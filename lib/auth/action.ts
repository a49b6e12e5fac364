import 'server-only';
import { notFound as nextNotFound, unstable_rethrow } from 'next/navigation';
import type { z } from 'zod';
import type { PersonRow } from '@/db/queries/people';
import type { FormState, PasskeyQuestion } from '@/lib/form-state';
import { formValues, typedValues } from './form-values';
import { asRefusal, fieldErrors } from './refusal';
import { currentPerson, requirePerson } from './session';

export type { FormState };

type Access = 'public' | 'signed-in' | 'steward';
/** `message` is shown above the form; `keep` leaves what was typed in it; `question` goes to an authenticator. */
type Done = { message?: string; keep?: boolean; question?: PasskeyQuestion } | void;
type ServerAction = (previous: FormState, form: FormData) => Promise<FormState>;

/** For actions anybody may call. */
export function formAction<S extends z.ZodType>(
  options: { schema: S; access: 'public' },
  work: (context: { input: z.output<S>; person: PersonRow | null }) => Promise<Done>,
): ServerAction;
/** For actions of somebody signed in. What they may do to which machine, `work` asks of `authorise`. */
export function formAction<S extends z.ZodType>(
  options: { schema: S; access?: 'signed-in' | 'steward' },
  work: (context: { input: z.output<S>; person: PersonRow }) => Promise<Done>,
): ServerAction;
export function formAction<S extends z.ZodType>(
  { schema, access = 'signed-in' }: { schema: S; access?: Access },
  work: (context: { input: z.output<S>; person: PersonRow }) => Promise<Done>,
): ServerAction {
  return async (_previous, form) => {
    // The caller is the network: it may send anything in place of a form.
    const values = form instanceof FormData ? formValues(form) : {};
    const typed = typedValues(values);
    const person = access === 'public' ? await currentPerson() : await requirePerson();
    if (access === 'steward' && person?.isSteward !== true) nextNotFound();

    const parsed = schema.safeParse(values);
    if (!parsed.success) {
      return { ok: false, message: 'Please look at the marked fields.', fields: fieldErrors(parsed.error), typed };
    }
    try {
      // The overloads promise a person wherever `access` is not public.
      const done = await work({ input: parsed.data, person: person as PersonRow });
      const message = done?.message === undefined ? {} : { message: done.message };
      const question = done?.question === undefined ? {} : { question: done.question };
      return { ok: true, ...message, ...question, fields: {}, typed: done?.keep === true ? typed : {} };
    } catch (error) {
      // Redirects and "not found" are Next's own errors.
      unstable_rethrow(error);
      const refusal = asRefusal(error);
      if (refusal.code === 'not-found') nextNotFound();
      return { ok: false, message: refusal.message, code: refusal.code, fields: refusal.fields, typed };
    }
  };
}

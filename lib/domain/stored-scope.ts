import { z } from 'zod';
import { isLocalDate } from './instants';
import { closedChoices, forSaleScope, narrowestScope, usualScope, type Scope } from './scope';

/** More than a machine has in a lifetime. */
const mostSeqs = 20_000;
const mostItems = 500;
const longestItem = 200;

const day = z.string().refine(isLocalDate);
/** A scope as it is stored. Strict: a member nobody knows may be one that was meant to close something. */
const storedScope = z.strictObject({
  entries: z
    .strictObject({
      seqs: z.array(z.int().min(0)).max(mostSeqs).optional(),
      items: z.array(z.string().min(1).max(longestItem)).max(mostItems).optional(),
      from: day.optional(),
      to: day.optional(),
    })
    .optional(),
  closed: z.array(z.enum(closedChoices)),
});

/**
 * A scope in one form only, so that two that open the same by the same choices are the same text. Null: the usual one.
 *
 * @example storeScope({ closed: ['prices'] }) // null
 */
export function storeScope(scope: Scope): string | null {
  const text = textOf(scope);
  return text === textOf(usualScope) ? null : text;
}

/**
 * Reads what is stored. What cannot be read opens as little as there is: a mistake in storage must not open a part.
 *
 * @example readScope(null) // usualScope
 */
export function readScope(stored: string | null): Scope {
  if (stored === null) return usualScope;
  try {
    const { entries, closed } = storedScope.parse(JSON.parse(stored));
    return JSON.parse(textOf({ closed, ...(entries === undefined ? {} : { entries: defined(entries) }) })) as Scope;
  } catch {
    return narrowestScope;
  }
}

/** Which of the form's choices a scope is. */
export function scopeChoice(scope: Scope): 'usual' | 'for-sale' | 'chosen' {
  const text = textOf(scope);
  if (text === textOf(usualScope)) return 'usual';
  return text === textOf(forSaleScope) ? 'for-sale' : 'chosen';
}

function textOf({ entries, closed }: Scope): string {
  const { seqs, items, from, to } = entries ?? {};
  const filters = defined({
    seqs: seqs && [...new Set(seqs)].sort((a, b) => a - b),
    items: items && [...new Set(items)].sort(),
    from,
    to,
  });
  return JSON.stringify({
    ...(Object.keys(filters).length === 0 ? {} : { entries: filters }),
    closed: closedChoices.filter((choice) => closed.includes(choice)),
  });
}

type Filters = NonNullable<Scope['entries']>;
function defined(filters: { [Name in keyof Filters]?: Filters[Name] | undefined }): Filters {
  return Object.fromEntries(Object.entries(filters).filter(([, value]) => value !== undefined)) as Filters;
}

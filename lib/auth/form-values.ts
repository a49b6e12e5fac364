const secretName = /password|token|secret/i;

/**
 * The text of a form by field name. A name ending in `[]` is a list however many were sent; Next's own fields and
 * files are left out.
 *
 * @example formValues(form) // { name: 'Imke', 'tasks[]': ['oil', 'filter'] }
 */
export function formValues(form: FormData): Record<string, string | string[]> {
  const values: Record<string, string | string[]> = {};
  for (const name of new Set(form.keys())) {
    if (name.startsWith('$ACTION')) continue;
    const all = form.getAll(name).filter((value): value is string => typeof value === 'string');
    // The last one wins, as a checkbox after a hidden field of its name is meant to.
    if (name.endsWith('[]')) values[name] = all;
    else if (all.length > 0) values[name] = all.at(-1)!;
  }
  return values;
}

/** What may be sent back to the form: everything but secrets. Lists come back as lines. */
export function typedValues(values: Record<string, string | string[]>): Record<string, string> {
  return Object.fromEntries(
    Object.entries(values)
      .filter(([name]) => !secretName.test(name))
      .map(([name, value]) => [name, Array.isArray(value) ? value.join('\n') : value]),
  );
}

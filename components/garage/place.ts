/** What the garage shows; it stands in the hash, so that the page itself is one and the same for everybody. */
export type GaragePlace =
  | { show: 'list' }
  | { show: 'no-signal' }
  | { show: 'new-worksheet'; machine: string | undefined }
  | { show: 'worksheet'; id: string; screen: string; step: string | undefined }
  | { show: 'new-receipt' }
  | { show: 'receipt'; id: string };

const idForm = /^[0-9a-zA-Z-]{1,64}$/;

/**
 * Reads the hash. What it cannot read is the list.
 *
 * @example placeFrom('#worksheet/7c0e/tasks') // worksheet 7c0e, its tasks
 */
export function placeFrom(hash: string): GaragePlace {
  const [show = '', first = '', second = '', third = ''] = hash.replace(/^#/, '').split('/');
  const id = idForm.test(first) ? first : undefined;
  if (show === 'new-worksheet') return { show, machine: id };
  if (show === 'new-receipt' || show === 'no-signal') return { show };
  if (show === 'worksheet' && id !== undefined) {
    const screen = idForm.test(second) ? second : 'start';
    return { show, id, screen, step: idForm.test(third) ? third : undefined };
  }
  if (show === 'receipt' && id !== undefined) return { show, id };
  return { show: 'list' };
}

/** A screen of one worksheet: `start`, `tasks`, `photos`, `summary`, or a task's id, with the key of its hold point. */
export function worksheetHash(id: string, screen: string, step?: string): string {
  return step === undefined ? `#worksheet/${id}/${screen}` : `#worksheet/${id}/${screen}/${step}`;
}

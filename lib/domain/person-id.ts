const personId = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/;

/**
 * Whether a body names somebody by id. Bodies sealed by earlier versions hold the name itself, where it cannot be
 * withheld without the rest.
 *
 * @example isPersonId('Imke Vandersloot') // false
 */
export function isPersonId(text: string): boolean {
  return personId.test(text);
}

/** A copy that lacks one key, for stores in which an absent field says something. */
export function without<T extends object, K extends keyof T>(whole: T, key: K): Omit<T, K> {
  const copy: Partial<T> = { ...whole };
  delete copy[key];
  return copy as Omit<T, K>;
}

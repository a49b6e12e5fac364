/** More would be a list nobody reads. */
const mostNamed = 3;
/** "a, b and c", or the first of them and how many others. */
export function listed(titles: string[], others: string): string {
  const named = titles.length > mostNamed + 1 ? titles.slice(0, mostNamed) : titles;
  const rest = titles.length - named.length;
  const all = rest === 0 ? named : [...named, `${rest} ${others}`];
  return all.length < 2 ? (all[0] ?? '') : `${all.slice(0, -1).join(', ')} and ${all.at(-1)}`;
}

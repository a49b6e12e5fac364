/**
 * The key of an item known by its name, the same on every device, so that two people who enter the same torque or
 * inspection without signal enter one, not two.
 *
 * @example itemId('Magnet on the engine drain plug') // 'magnet-on-the-engine-drain-plug'
 */
export function itemId(name: string): string {
  const id = name
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, '-')
    .replace(/^-|-$/g, '')
    .slice(0, 64);
  return id === '' ? 'item' : id;
}

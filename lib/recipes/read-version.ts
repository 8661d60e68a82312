/**
 * The number of a version as it stands in an address; null for none, or for what cannot be one.
 *
 * @example readVersion('2') // => 2
 */
export function readVersion(text: string | string[] | undefined): number | null {
  return typeof text === 'string' && /^[1-9]\d{0,5}$/.test(text) ? Number(text) : null
}

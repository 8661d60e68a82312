/**
 * What of `after` differs from `before`, on both sides: the two halves of a line of history.
 *
 * @example changedFields({ name: 'Rack A', airSpeedFansOnMps: 1.2 }, { name: 'Rack A', airSpeedFansOnMps: 1.4 })
 * // => { before: { airSpeedFansOnMps: 1.2 }, after: { airSpeedFansOnMps: 1.4 } }
 */
export function changedFields(
  before: Readonly<Record<string, unknown>>,
  after: Readonly<Record<string, unknown>>,
): { before: Record<string, unknown>; after: Record<string, unknown> } {
  const keys = Object.keys(after).filter((key) => JSON.stringify(before[key] ?? null) !== JSON.stringify(after[key] ?? null))
  return {
    before: Object.fromEntries(keys.map((key) => [key, before[key] ?? null])),
    after: Object.fromEntries(keys.map((key) => [key, after[key] ?? null])),
  }
}

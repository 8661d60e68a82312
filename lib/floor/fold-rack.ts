export type RailName = 'last coat on' | 'dried out' | 'ready'

/** What one rail of the rack shows: so many tags, and whether a key counts those that did not fit. */
export type Rail = { name: RailName; count: number; shown: number; hasMore: boolean }

/** How many tags hang side by side on each rail. */
const ABREAST: Record<RailName, number> = { 'last coat on': 1, 'dried out': 1, ready: 2 }

/**
 * How many tags each rail of the finishing rack shows in the hooks at hand. A rail with trees gets at least one row; the rows left
 * over go round to whoever still lacks one. Where not all fit, a key in the last row of the rail counts the rest.
 *
 * Shape: trees for each rail and rows of hooks for all of them together; a rail without trees takes none.
 */
export function foldRack(counts: Record<RailName, number>, rows: number): Rail[] {
  const names: RailName[] = ['last coat on', 'dried out', 'ready']
  const needed = (name: RailName) => Math.ceil(counts[name] / ABREAST[name])
  const given = new Map<RailName, number>(names.map((name) => [name, Math.min(1, needed(name))]))
  let left = rows - [...given.values()].reduce((sum, count) => sum + count, 0)
  for (let isMoving = true; isMoving && left > 0;) {
    isMoving = false
    for (const name of names) {
      if (left <= 0 || given.get(name)! >= needed(name)) continue
      given.set(name, given.get(name)! + 1)
      left -= 1
      isMoving = true
    }
  }
  return names.map((name) => {
    const places = given.get(name)! * ABREAST[name]
    const hasMore = counts[name] > places
    // Side by side the last place is the key to the rest; alone in its row a tag shares the row with it.
    const shown = hasMore && ABREAST[name] > 1 ? places - 1 : Math.min(places, counts[name])
    return { name, count: counts[name], shown, hasMore }
  })
}

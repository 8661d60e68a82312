/** Closed range that a parameter is searched in. */
export type SearchRange = { low: number; high: number }

const GRID_CELLS = 40

/** Narrows two cells of the grid to 1e-9 of the range. */
const GOLDEN_STEPS = 38

const GOLDEN = (Math.sqrt(5) - 1) / 2

/**
 * The point of a box at which `cost` is least. The first parameter is searched on a grid and then by golden section about the best
 * point of it, each time with the parameters after it already at their own best: a profile. Needs no starting values and no
 * derivatives, and cannot leave its ranges. Made for one or two parameters; each further one multiplies the work by eighty.
 *
 * Shape: one value for each range, in their order. A cost that is not a number counts as infinite.
 * @source golden section: Kiefer 1953, Proc. Amer. Math. Soc. 4, 502. Proved against NIST StRD in tests/reference.
 */
export function profileSearch(
  cost: (parameters: readonly number[]) => number,
  ranges: readonly SearchRange[],
): { parameters: number[]; cost: number } {
  const [range, ...inner] = ranges
  if (!range) {
    const value = cost([])
    return { parameters: [], cost: Number.isNaN(value) ? Infinity : value }
  }
  const at = (value: number) => {
    const rest = profileSearch((others) => cost([value, ...others]), inner)
    return { parameters: [value, ...rest.parameters], cost: rest.cost }
  }

  const cell = (range.high - range.low) / GRID_CELLS
  let best = at(range.low)
  for (let index = 1; index <= GRID_CELLS; index += 1) {
    const found = at(index === GRID_CELLS ? range.high : range.low + index * cell)
    if (found.cost < best.cost) best = found
  }

  let from = Math.max(range.low, best.parameters[0]! - cell)
  let to = Math.min(range.high, best.parameters[0]! + cell)
  let left = at(to - GOLDEN * (to - from))
  let right = at(from + GOLDEN * (to - from))
  for (let step = 0; step < GOLDEN_STEPS; step += 1) {
    if (left.cost <= right.cost) {
      to = right.parameters[0]!
      right = left
      left = at(to - GOLDEN * (to - from))
    } else {
      from = left.parameters[0]!
      left = right
      right = at(from + GOLDEN * (to - from))
    }
  }
  const narrowed = left.cost <= right.cost ? left : right
  return narrowed.cost < best.cost ? narrowed : best
}

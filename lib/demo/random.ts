/**
 * A number in [0, 1) that belongs to these whole numbers and to no others: the same in, the same out, on every machine.
 *
 * @source integer mixing after MurmurHash3's finaliser; good enough for noise and for picking names, for nothing else.
 */
export function unitOf(...parts: readonly number[]): number {
  let hash = 0x9e3779b9
  for (const part of parts) {
    // Both halves of a large number count: instants have more than 32 bits.
    for (const half of [part >>> 0, Math.floor(part / 2 ** 32) >>> 0]) {
      hash = Math.imul(hash ^ half, 0x85ebca6b)
      hash = Math.imul(hash ^ (hash >>> 13), 0xc2b2ae35)
      hash ^= hash >>> 16
    }
  }
  return (hash >>> 0) / 2 ** 32
}

/** A repeatable stream of numbers in [0, 1). */
export type Random = () => number

/** @example seededRandom(7)() === seededRandom(7)() // => true */
export function seededRandom(seed: number): Random {
  let step = 0
  return () => unitOf(seed, (step += 1))
}

/** One of a list. @throws {RangeError} for an empty list. */
export function pick<Item>(items: readonly Item[], random: Random): Item {
  const item = items[Math.floor(random() * items.length)]
  if (item === undefined) throw new RangeError('There is nothing to pick from.')
  return item
}

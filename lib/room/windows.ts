export type Window = { from: number; to: number }

/**
 * The stretches of time around some instants, joined where they meet: so that a batch from all over a year costs by its rows and not by
 * the year.
 *
 * @example windowsAround([100, 105, 300], { before: 10, after: 20 }) // => [{ from: 90, to: 125 }, { from: 290, to: 320 }]
 */
export function windowsAround(instants: readonly number[], { before, after }: { before: number; after: number }): Window[] {
  const windows: Window[] = []
  for (const at of instants.toSorted((one, other) => one - other)) {
    const last = windows.at(-1)
    if (last && at - before <= last.to) last.to = at + after
    else windows.push({ from: at - before, to: at + after })
  }
  return windows
}

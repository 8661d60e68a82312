declare global {
  var kilnwardThings: Map<string, unknown> | undefined
}

const things = (globalThis.kilnwardThings ??= new Map<string, unknown>())

/** One thing per process. A bundler may load a module once per route, and a limit counted per route is no limit. */
export function processWide<Thing>(name: string, make: () => Thing): Thing {
  if (!things.has(name)) things.set(name, make())
  // oxlint-disable-next-line typescript/no-unsafe-type-assertion -- what was put in under this name
  return things.get(name) as Thing
}

/** The steps from a whole message to one value in it: names, and places in lists as text. Empty: the message itself. */
export type JsonPath = readonly string[]

const STEP = /^(?:\.?([^.[\]'"\s$]+)|\[(\d{1,4})\]|\['([^']+)'\]|\["([^"]+)"\])/
const MOST_STEPS = 16

/**
 * Reads a path such as `data.temp`, `$.data[0].temp` or `['air.temp']`; `$` alone is the whole message. Null where it is none.
 *
 * @example readJsonPath('$.probes[1].temp') // => ['probes', '1', 'temp']
 */
export function readJsonPath(text: string): JsonPath | null {
  if (text === '') return null
  const steps: string[] = []
  let rest = text.startsWith('$') ? text.slice(1) : text
  while (rest !== '') {
    // Only the first name may stand without its dot, and not after $.
    const isBare = !rest.startsWith('.') && !rest.startsWith('[')
    if (isBare && (steps.length > 0 || text.startsWith('$'))) return null
    if (rest.startsWith('.') && steps.length === 0 && !text.startsWith('$')) return null
    const [whole = '', ...names] = STEP.exec(rest) ?? []
    const step = names.find((name) => name !== undefined)
    if (step === undefined || steps.length === MOST_STEPS) return null
    steps.push(step)
    rest = rest.slice(whole.length)
  }
  return steps
}

/** The value at a path; undefined where there is none. */
export function valueAtPath(message: unknown, path: JsonPath): unknown {
  let value = message
  for (const step of path) {
    // Only what the message itself holds: `constructor` is a path to nothing, nor is a list's `length` in it.
    if (value === null || typeof value !== 'object' || !Object.prototype.propertyIsEnumerable.call(value, step)) return undefined
    value = (value as Record<string, unknown>)[step]
  }
  return value
}

const DEEPEST = 5

/**
 * The paths in a message that lead to a figure or a text, the first few: for somebody whose own path leads to nothing.
 *
 * @example figurePaths({ env: { t: 21.4, rh: 52 } }, 5) // => ['env.t', 'env.rh']
 */
export function figurePaths(message: unknown, most: number): string[] {
  const found: string[] = []
  const walk = (value: unknown, path: string, depth: number) => {
    if (found.length >= most || depth > DEEPEST) return
    if (typeof value === 'number' || typeof value === 'string') {
      found.push(path === '' ? '$' : path)
    } else if (Array.isArray(value)) {
      for (const [index, each] of value.slice(0, most).entries()) walk(each, `${path === '' ? '$' : path}[${index}]`, depth + 1)
    } else if (value !== null && typeof value === 'object') {
      for (const [name, each] of Object.entries(value)) walk(each, joined(path, name), depth + 1)
    }
  }
  walk(message, '', 0)
  return found
}

function joined(path: string, name: string): string {
  const isPlain = /^[^.[\]'"\s$]+$/.test(name)
  if (!isPlain) return `${path === '' ? '$' : path}['${name.slice(0, 40)}']`
  return path === '' ? name.slice(0, 40) : `${path}.${name.slice(0, 40)}`
}

import fc from 'fast-check'

/** Values that programs stumble over, beside what chance brings. */
const NASTY: readonly unknown[] = [
  null,
  true,
  0,
  -0,
  -1,
  1e308,
  -1e308,
  Number.MAX_SAFE_INTEGER,
  2 ** 63,
  0.1,
  '',
  ' ',
  '\u0000',
  'a\u0000b',
  '\ud800',
  '\u202e',
  '../../etc/passwd',
  "'; DROP TABLE trees; --",
  '" OR 1=1 --',
  '%s%n%x',
  '${7*7}',
  '<script>alert(1)</script>',
  'é'.normalize('NFD'),
  '1970-01-01T00:00:00Z',
  '9999-12-31T23:59:59.999Z',
  'x'.repeat(60_000),
  [],
  {},
  [[]],
  [null],
  { $gt: '' },
  { length: 1e9 },
  // oxlint-disable-next-line unicorn/no-thenable -- that is what is odd about it
  { toString: 1, valueOf: null, then: 1 },
]
const KEYS = ['__proto__', 'constructor', 'prototype', 'toString', 'role', 'isDemo', 'memberId', '', 'a'.repeat(5000)]

const value = fc.oneof(fc.constantFrom(...NASTY), fc.jsonValue({ maxDepth: 4 }))

type Path = readonly (string | number)[]

function pathsOf(part: unknown, path: Path = []): Path[] {
  if (part === null || typeof part !== 'object') return [path]
  const inner = Object.entries(part).flatMap(([key, each]) => pathsOf(each, [...path, Array.isArray(part) ? Number(key) : key]))
  return [path, ...inner]
}

/** A copy with the value at the path put in, or taken out. */
function changedAt(part: unknown, [key, ...rest]: Path, change: { put: unknown } | 'remove'): unknown {
  if (key === undefined) return change === 'remove' ? undefined : change.put
  if (Array.isArray(part)) {
    const copy: unknown[] = [...part]
    if (rest.length === 0 && change === 'remove') copy.splice(Number(key), 1)
    else copy[Number(key)] = changedAt(copy[Number(key)], rest, change)
    return copy
  }
  const entries = Object.entries(part as Record<string, unknown>)
  if (rest.length === 0 && change === 'remove') return Object.fromEntries(entries.filter(([name]) => name !== key))
  return Object.fromEntries(entries.map(([name, each]) => [name, name === key ? changedAt(each, rest, change) : each]))
}

/** JSON text, since '__proto__' as a key exists in text only. */
function withKey(text: string, key: string, put: unknown): string {
  return text.startsWith('{')
    ? `{${JSON.stringify(key)}:${JSON.stringify(put) ?? 'null'}${text === '{}' ? '}' : `,${text.slice(1)}`}`
    : text
}

/** Bodies near a valid one: a field changed, gone, doubled or added, or several of these. */
const near = (valid: unknown) =>
  fc
    .array(
      fc.record({
        path: fc.constantFrom(...pathsOf(valid)),
        put: value,
        how: fc.constantFrom('put' as const, 'put' as const, 'remove' as const, 'key' as const),
        key: fc.constantFrom(...KEYS),
      }),
      { minLength: 0, maxLength: 3 },
    )
    .map((changes) => {
      let body = valid
      let keys: { key: string; put: unknown }[] = []
      for (const { path, put, how, key } of changes) {
        if (how === 'key') keys = [...keys, { key, put }]
        else if (pathsOf(body).some((known) => known.join('/') === path.join('/'))) {
          body = changedAt(body, path, how === 'remove' ? 'remove' : { put })
        }
      }
      return keys.reduce((text, { key, put }) => withKey(text, key, put), JSON.stringify(body) ?? '')
    })

const deep = fc.constantFrom(
  '['.repeat(30_000),
  `${'['.repeat(20_000)}${']'.repeat(20_000)}`,
  `${'{"a":'.repeat(9000)}1${'}'.repeat(9000)}`,
  `{"readings":${'['.repeat(20_000)}${']'.repeat(20_000)}}`,
  `{"reason":${'['.repeat(20_000)}${']'.repeat(20_000)},"operationId":"0b9f3a52-6c1d-4a57-9f0e-2f8f5f4f7a11"}`,
)

/** Not JSON, or hardly. */
const broken = (valid: unknown) => {
  const text = JSON.stringify(valid)
  return fc.oneof(
    fc.integer({ min: 0, max: text.length }).map((length) => text.slice(0, length)),
    fc.string({ unit: 'binary', maxLength: 200 }),
    fc.constantFrom(
      '',
      ' ',
      '\uFEFF{}',
      'null',
      '"text"',
      '12',
      'NaN',
      '{,}',
      "{'a':1}",
      '{"a":1}{"a":1}',
      'undefined',
      '\u0000',
      'x'.repeat(70_000),
    ),
  )
}

/** Bodies to send to a door that takes `valid`: most near it, some far from it, some not JSON at all. */
export function oddBodies(valid: unknown): fc.Arbitrary<string> {
  return fc.oneof(
    { weight: 6, arbitrary: near(valid) },
    { weight: 2, arbitrary: fc.json({ maxDepth: 5 }) },
    { weight: 2, arbitrary: broken(valid) },
    { weight: 1, arbitrary: deep },
  )
}

/** Parts of an address: the id that belongs there, and what does not. */
export const oddParts = (valid: string): fc.Arbitrary<string> =>
  fc.oneof(
    { weight: 3, arbitrary: fc.constant(valid) },
    {
      weight: 1,
      arbitrary: fc.constantFrom(
        '0',
        '-1',
        '%00',
        '..%2f..',
        'null',
        '__proto__',
        "'--",
        'x'.repeat(3000),
        valid.toUpperCase(),
        '%F0%9F%90%9F',
      ),
    },
    { weight: 1, arbitrary: fc.string({ minLength: 1, maxLength: 40 }).map((text) => encodeURIComponent(text.toWellFormed())) },
  )

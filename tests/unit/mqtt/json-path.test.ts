import { describe, expect, it } from 'vitest'
import { figurePaths, readJsonPath, valueAtPath } from '@/lib/mqtt/json-path'

const message = { data: [{ temp: 21.4, 'air.rh': 52 }], id: 'loft', gone: null, ok: true }

describe('a path into a message', () => {
  it.each<[string, string[]]>([
    ['$', []],
    ['temp', ['temp']],
    ['data.temp', ['data', 'temp']],
    ['$.data[0].temp', ['data', '0', 'temp']],
    ['data[0]["air.rh"]', ['data', '0', 'air.rh']],
    ["['air temp']", ['air temp']],
    ['$[12]', ['12']],
    ['SHT31-temp', ['SHT31-temp']],
  ])('%s', (text, steps) => expect(readJsonPath(text)).toEqual(steps))

  it.each(['', '.temp', 'a..b', 'a.', 'a[', 'a[x]', '$a', 'a b', 'a[0]b', '$..temp', '$[*]', "['']", 'a.'.repeat(20) + 'a'])(
    '%j is none',
    (text) => expect(readJsonPath(text)).toBeNull(),
  )

  it('leads to what the message holds, and to nothing else', () => {
    const at = (text: string) => valueAtPath(message, readJsonPath(text) ?? [])
    expect(at('data[0].temp')).toBe(21.4)
    expect(at("data[0]['air.rh']")).toBe(52)
    expect(at('gone')).toBeNull()
    for (const text of ['data[1].temp', 'gone.temp', 'id.length', 'data.length', 'constructor', 'toString.name', '__proto__']) {
      expect(at(text), text).toBeUndefined()
    }
    expect(valueAtPath(21.4, [])).toBe(21.4)
  })

  it('every path that is named leads to a figure or a text', () => {
    const paths = figurePaths(message, 6)
    expect(paths).toEqual(['data[0].temp', "data[0]['air.rh']", 'id'])
    for (const path of paths) expect(valueAtPath(message, readJsonPath(path) ?? []), path).toBeDefined()
    expect(figurePaths([1, 2, 3], 2)).toEqual(['$[0]', '$[1]'])
    expect(figurePaths(21, 6)).toEqual(['$'])
    expect(figurePaths({ a: [] }, 6)).toEqual([])
  })
})

import { describe, expect, it } from 'vitest'
import { setUpLines } from '@/lib/floor/set-up'

const NOTHING = { faceBaths: 0, backupBaths: 0, sensors: 0, places: 0, recipes: 0, people: 1 }
const ALL = { faceBaths: 1, backupBaths: 2, sensors: 1, places: 3, recipes: 3, people: 4 }

describe('the list beside an empty floor', () => {
  it('says what is missing and leads there', () => {
    const lines = setUpLines(NOTHING, 'owner')
    expect(lines.filter(({ isDone }) => isDone)).toEqual([])
    expect(lines.map(({ href }) => href)).toEqual(['/settings/baths', '/settings/sensors', '/settings/places', '/recipes', '/people'])
  })
  it('counts what is there', () => {
    const lines = setUpLines(ALL, 'owner')
    expect(lines.every(({ isDone }) => isDone)).toBe(true)
    expect(lines.map(({ words }) => words)).toEqual(['3 baths', '1 sensor', '3 places', '3 recipes', '4 members'])
  })
  it('names the kind of bath that is missing', () => {
    expect(setUpLines({ ...ALL, backupBaths: 0 }, 'owner')[0]).toMatchObject({ isDone: false, words: 'A backup bath is missing' })
  })
  it('leads nobody to a page that is not theirs', () => {
    expect(setUpLines(NOTHING, 'supervisor').at(-1)?.href).toBeNull()
  })
})

import { describe, expect, it } from 'vitest'
import { floorNews } from '@/lib/floor/news'
import { bathsByNeed, careLines, mainRoom, readingAge, roomsByWorry } from '@/lib/floor/strip'
import { afternoonFixture, crowdFixture, FIXTURE_NOW, queueTreeFixture, roomFixture } from '../../factories/queue-fixture'

const MINUTE = 60_000
const plain = (text: string) => text.replaceAll('\u00A0', ' ')
const age = (overrides: Parameters<typeof roomFixture>[0]) => plain(readingAge(roomFixture(overrides), FIXTURE_NOW, 'Europe/London'))

describe('roomsByWorry', () => {
  it('names the silent room first, then the too dry, then the slow', () => {
    expect(roomsByWorry(crowdFixture(60)).map((room) => room.sensorName)).toEqual(['Net loft', 'Drying tunnel', 'Shell room'])
  })

  it('does not worry about a room without trees', () => {
    const queue = afternoonFixture()
    const rooms = [...queue.rooms, roomFixture({ sensorId: 9, sensorName: 'Empty store', isStale: true, pull: 'not known' })]
    expect(roomsByWorry({ ...queue, rooms })[0]?.sensorName).toBe('Shell room')
  })
})

describe('mainRoom', () => {
  it('is a room that speaks, with the silent ones counted beside it', () => {
    const { room, silentBeside } = mainRoom(crowdFixture(60))
    expect(room?.isStale).toBe(false)
    expect(silentBeside).toBe(1)
  })

  it('is the silent room when no other speaks', () => {
    const queue = afternoonFixture()
    const rooms = queue.rooms.map((room) => ({ ...room, isStale: true }))
    expect(mainRoom({ ...queue, rooms })).toMatchObject({ room: { isStale: true }, silentBeside: 0 })
  })
})

describe('careLines', () => {
  const harmed = (tag: string, ...codes: ('chill' | 'swing' | 'overdue')[]) => ({
    ...queueTreeFixture({ tag, state: 'drying' }),
    warnings: codes.map((code) => ({
      code,
      level: code === 'chill' ? ('stop' as const) : ('warn' as const),
      text: `${code} in °C. Remedy.`,
      textInDegF: `${code} in °F. Remedy.`,
    })),
  })

  it('says what harms shells as they hang once, with whose they are, the gravest first', () => {
    const trees = [harmed('T-1', 'swing'), ...['T-2', 'T-3', 'T-4', 'T-5'].map((tag) => harmed(tag, 'chill', 'swing'))]
    expect(careLines(trees, 'degF')).toEqual([
      { code: 'chill', level: 'stop', tags: 'T-2, T-3, T-4 and 1 more', text: 'chill in °F. Remedy.' },
      { code: 'swing', level: 'warn', tags: 'T-1, T-2, T-3 and 2 more', text: 'swing in °F. Remedy.' },
    ])
  })

  it('leaves out what stands in the column of the dips, and says nothing of a calm floor', () => {
    expect(careLines([{ ...harmed('T-1', 'overdue'), state: 'overdue' }], 'degC')).toEqual([])
    expect(careLines([harmed('T-1')], 'degC')).toEqual([])
    expect(careLines([harmed('T-1', 'overdue')], 'degC')).toHaveLength(1)
  })
})

describe('readingAge', () => {
  it('tells the age of a reading, or since when there is none', () => {
    expect(age({ measuredAt: FIXTURE_NOW - 2 * MINUTE })).toBe('read 2 min ago')
    expect(age({ measuredAt: FIXTURE_NOW - 65 * MINUTE, isStale: true })).toBe('no reading since 14:05')
    expect(age({ measuredAt: null, isStale: true })).toBe('no reading yet')
  })
})

it('puts the bath that wants stirring first', () => {
  expect(bathsByNeed(afternoonFixture().baths).map((bath) => bath.name)).toEqual(['Backup slurry', 'Face slurry'])
})

describe('floorNews', () => {
  const tree = queueTreeFixture({ tag: 'T-118', state: 'nearly dry', coatsOn: 5 })

  it('says what has come to be dipped', () => {
    expect(floorNews([tree], [{ ...tree, state: 'dip now' }])).toEqual({ polite: 'Dip now: T-118, dip 6.', assertive: '' })
  })

  it('says overdue once', () => {
    const overdue = { ...tree, state: 'overdue' as const }
    expect(floorNews([tree], [overdue]).assertive).toBe('Overdue: T-118, dip 6.')
    expect(floorNews([overdue], [overdue])).toEqual({ polite: '', assertive: '' })
  })

  it('is silent about a tree that was to dip already, and about one it has never seen', () => {
    expect(floorNews([{ ...tree, state: 'dip now' }], [{ ...tree, state: 'waiting' }]).polite).toBe('')
    expect(floorNews([], [{ ...tree, state: 'dip now' }]).polite).toBe('')
  })
})

import { describe, expect, it } from 'vitest'
import { bathInput } from '@/lib/coats/bath-input'
import { nameList } from '@/lib/format/name-list'
import { placeChange, placeFormValues, placeInput, readPlaceForm } from '@/lib/room/place-input'
import { sensorInput } from '@/lib/room/sensor-input'
import { fieldErrors } from '@/lib/trees/tree-form-values'

const PLACE = {
  name: 'Rack A',
  sensorId: '3',
  airSpeedFansOnMps: '1,4',
  airSpeedFansOffMps: '0.1',
  fanDuty: '30',
  airMeasuredOn: '2026-11-12',
  airMeasuredWith: 'hot-wire meter',
  airMeasuredBy: 'Maud Fell',
  fans: [{ weekday: 1, on: '06:00', off: '18:00' }],
}
const complaints = (overrides: Partial<typeof PLACE>) => {
  const parsed = placeInput.safeParse({ ...PLACE, ...overrides })
  return parsed.success ? {} : fieldErrors(parsed.error)
}

describe('a place as typed', () => {
  it('is read with a decimal comma, and comes back into its fields', () => {
    const input = placeInput.parse(PLACE)
    expect(input).toEqual({
      name: 'Rack A',
      sensorId: 3,
      airSpeedFansOnMps: 1.4,
      airSpeedFansOffMps: 0.1,
      fanDuty: 0.3,
      airMeasuredOn: '2026-11-12',
      airMeasuredWith: 'hot-wire meter',
      airMeasuredBy: 'Maud Fell',
      fans: [{ weekday: 1, onMinute: 360, offMinute: 1080 }],
    })
    expect(placeFormValues({ ...input, fanHours: input.fans })).toEqual({ ...PLACE, airSpeedFansOnMps: '1.4' })
  })

  it('comes from its fields, stretches by their number', () => {
    const form = new FormData()
    const { fans: _fans, ...fields } = PLACE
    for (const [name, value] of Object.entries(fields)) form.set(name, value)
    form.set('fans.0.weekday', '1')
    form.set('fans.0.on', ' 06:00')
    form.set('fans.0.off', '18:00')
    // Beyond a gap nothing is read.
    form.set('fans.2.weekday', '5')
    expect(readPlaceForm(form)).toEqual(PLACE)
  })

  it.each(['-0.1', '20.1', '', 'fast', 'NaN', 'Infinity'])('has no air speed of %j', (speed) => {
    expect(Object.keys(complaints({ airSpeedFansOnMps: speed, airSpeedFansOffMps: speed }))).toEqual([
      'airSpeedFansOnMps',
      'airSpeedFansOffMps',
    ])
  })

  it.each(['0', '20'])('may have an air speed of %j', (speed) => {
    expect(complaints({ airSpeedFansOnMps: speed, airSpeedFansOffMps: speed })).toEqual({})
  })

  it.each(['-1', '101', '', 'half'])('has no fans that blow for %j percent of the time', (fanDuty) => {
    expect(Object.keys(complaints({ fanDuty }))).toEqual(['fanDuty'])
  })

  it.each([0, 0.07, 0.29, 0.3, 0.57, 1])('keeps a share of %d through its form', (fanDuty) => {
    const input = placeInput.parse(PLACE)
    const values = placeFormValues({ ...input, fanDuty, fanHours: input.fans })
    expect(placeInput.parse({ ...values, fans: PLACE.fans }).fanDuty).toBe(fanDuty)
  })

  it('has an estimated air speed where no day is given, and then neither meter nor name', () => {
    const estimate = { airMeasuredOn: '', airMeasuredWith: '', airMeasuredBy: '' }
    expect(placeInput.parse({ ...PLACE, ...estimate })).toMatchObject({ airMeasuredOn: null, airMeasuredWith: null, airMeasuredBy: null })
    expect(complaints({ ...estimate, airMeasuredOn: '2026-11-12' })).toEqual({})
    for (const half of [{ airMeasuredWith: 'vane meter' }, { airMeasuredBy: 'Maud Fell' }]) {
      expect(complaints({ ...estimate, ...half })).toEqual({ airMeasuredOn: expect.stringMatching(/^Give the day/) })
    }
    expect(complaints({ airMeasuredOn: '12 Nov' })).toEqual({ airMeasuredOn: expect.stringMatching(/^Give a day/) })
    expect(complaints({ airMeasuredWith: 'wet finger' })).toEqual({ airMeasuredWith: 'Choose a meter.' })
  })

  it.each(['', '0', '1.5', 'x'])('has no sensor %j', (sensorId) => {
    expect(complaints({ sensorId })).toEqual({ sensorId: 'Choose a sensor.' })
  })

  it('has stretches that end after they begin and do not overlap on one day', () => {
    expect(complaints({ fans: [{ weekday: 1, on: '06:00', off: '06:00' }] })).toEqual({ 'fans.0.off': 'Fans go off after they go on.' })
    const touching = [
      { weekday: 1, on: '06:00', off: '12:00' },
      { weekday: 1, on: '12:00', off: '00:00' },
      { weekday: 2, on: '06:00', off: '12:00' },
    ]
    expect(complaints({ fans: touching })).toEqual({})
    expect(complaints({ fans: [...touching, { weekday: 2, on: '11:59', off: '13:00' }] })).toEqual({
      'fans.3.on': 'It overlaps another stretch of this day.',
    })
  })

  it('that changes says since when', () => {
    expect(placeChange.safeParse({ ...PLACE, since: '' }).success).toBe(false)
    expect(placeChange.parse({ ...PLACE, since: 'always' }).since).toBe('always')
  })
})

describe('names', () => {
  it('of baths and sensors have letters, and an end', () => {
    for (const name of ['', '   ', 'x'.repeat(61)]) {
      expect(bathInput.safeParse({ name, kind: 'face' }).success).toBe(false)
      expect(sensorInput.safeParse({ name, kind: 'logger' }).success).toBe(false)
    }
    expect(bathInput.parse({ name: ' Zircon ', kind: 'backup' })).toEqual({ name: 'Zircon', kind: 'backup' })
    expect(bathInput.safeParse({ name: 'Zircon', kind: '' }).success).toBe(false)
    expect(sensorInput.safeParse({ name: 'Post', kind: 'thermometer' }).success).toBe(false)
  })

  it('stand in a sentence, the first five of them', () => {
    expect([[], ['a'], ['a', 'b'], ['a', 'b', 'c', 'd', 'e']].map(nameList)).toEqual(['', 'a', 'a and b', 'a, b, c, d and e'])
    expect(nameList(['a', 'b', 'c', 'd', 'e', 'f', 'g'])).toBe('a, b, c, d, e and 2 more')
  })
})

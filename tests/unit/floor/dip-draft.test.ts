import { describe, expect, it } from 'vitest'
import { dipRun } from '@/lib/coats/dip-contract'
import {
  backToWords,
  checkDial,
  coatNumberOf,
  deviationsOf,
  isSameRun,
  nearPlaces,
  needsReason,
  needsWallReading,
  readAloudLines,
  reasonAsk,
  runBody,
  startDraft,
  stillToDip,
  stuccoChoices,
  withTree,
} from '@/lib/floor/dip-draft'
import { afternoonFixture, FIXTURE_NOW, queueTreeFixture } from '../../factories/queue-fixture'

const queue = afternoonFixture()
const tree = (tag: string) => queue.trees.find((candidate) => candidate.tag === tag)!
const run = [tree('T-118'), tree('T-120'), tree('T-121')]

describe('startDraft', () => {
  it('takes bath, stucco and drain from the recipe and hangs each tree back', () => {
    expect(startDraft(run)).toMatchObject({ bathId: run[0]!.next!.bathId, stucco: 'coarse', drainSeconds: 45, placeId: null, way: 'dip' })
  })

  it('leaves out trees that take no coat', () => {
    expect(startDraft([tree('T-113')])).toBeNull()
    expect(startDraft([tree('T-118'), tree('T-113')])?.treeIds).toEqual([tree('T-118').id])
  })
})

describe('reasonAsk', () => {
  it('asks nothing of trees that are free and dry', () => {
    expect(reasonAsk(run)).toBeNull()
  })

  it('offers reasons of both kinds for a tree that is held and wet, and names the hold', () => {
    const both = reasonAsk([{ ...tree('T-125'), state: 'held' }])!
    expect(both.presets).toEqual(expect.arrayContaining(['Feels dry', 'Patched, goes on']))
    expect(new Set(both.presets).size).toBe(both.presets.length)
    expect(both.keyWithout).toBe('It is done: log although held')
    expect(both.keyWithReason('dip 3')).toBe('Log dip 3 although held')
  })

  it('offers the reasons of its own kind for one that is held or wet only', () => {
    expect(reasonAsk([tree('T-114')])!.presets).not.toContain('Feels dry')
    expect(reasonAsk([tree('T-125')])!.presets).not.toContain('Patched, goes on')
  })
})

describe('readAloudLines', () => {
  const seal = queueTreeFixture({ tag: 'T-901', state: 'waiting', coatsOn: 7 })

  it('says a line that all share once, without tags', () => {
    expect(readAloudLines(run)).toEqual(['Blow off loose stucco. Brush bubbles. Wipe the rim.'])
  })

  it('tells whose line it is where lines differ', () => {
    expect(readAloudLines([...run, tree('T-124'), seal])).toEqual([
      'T-118, T-120, T-121 and 1 more: Blow off loose stucco. Brush bubbles. Wipe the rim.',
      'T-901: Blow off loose stucco. Seal is slurry only. Drain until it stops.',
    ])
  })
})

describe('runBody', () => {
  it('is what the server takes', () => {
    const draft = { ...startDraft(run)!, done: { kind: 'ago', minutes: 20 } as const }
    const body = runBody(draft, run, FIXTURE_NOW, null)
    expect(dipRun.safeParse({ operationId: '00000000-0000-4000-8000-000000000001', ...body }).success).toBe(true)
    expect(body).toMatchObject({ dippedAt: FIXTURE_NOW - 20 * 60_000, roughTime: 10 })
    expect(body.trees.map((part) => part.coatNumber)).toEqual([6, 5, 5])
    expect(body).not.toHaveProperty('room')
  })

  it('never dates a dip ahead of the clock', () => {
    const draft = { ...startDraft(run)!, done: { kind: 'at', at: FIXTURE_NOW + 60_000 } as const }
    expect(runBody(draft, run, FIXTURE_NOW, null).dippedAt).toBe(FIXTURE_NOW)
  })

  it('gives the reason to those that need one only', () => {
    const wet = tree('T-125')
    const draft = { ...startDraft([wet, ...run])!, reason: ' Feels dry ' }
    expect(runBody(draft, [wet, run[0]!], FIXTURE_NOW, null).trees.map((part) => part.reason)).toEqual(['Feels dry', undefined])
  })

  it('takes the number that a person has corrected', () => {
    const draft = { ...startDraft(run)!, coatNumbers: { [run[0]!.id]: 7 } }
    expect(coatNumberOf(draft, run[0]!)).toBe(7)
    expect(runBody(draft, run, FIXTURE_NOW, null).trees[0]?.coatNumber).toBe(7)
  })
})

describe('a coat that another tablet logs while the sheet is open', () => {
  const before = tree('T-118')
  const draft = startDraft([before])!
  const after = { ...before, coatsOn: 6, next: { ...before.next!, number: 7 }, state: 'wet' as const }

  it('does not turn this dip into the next one', () => {
    expect(before.next!.number).toBe(6)
    expect(runBody(draft, [after], FIXTURE_NOW, null).trees[0]?.coatNumber).toBe(6)
    expect(stillToDip(draft, [before])).toEqual([before])
    expect(stillToDip(draft, [after])).toEqual([])
  })

  it('is not the run that was kept', () => {
    expect(isSameRun(draft, startDraft([before])!)).toBe(true)
    expect(isSameRun(draft, startDraft([after])!)).toBe(false)
  })

  it('keeps the number of a tree that joined the run', () => {
    const joined = withTree(startDraft([tree('T-120')])!, before)
    expect(joined.treeIds).toEqual([tree('T-120').id, before.id])
    expect(coatNumberOf(joined, after)).toBe(6)
  })
})

describe('needsReason', () => {
  it.each([
    ['T-118', false],
    ['T-126', false],
    ['T-125', true],
    ['T-127', true],
    ['T-114', true],
  ])('%s: %s', (tag, needs) => {
    expect(needsReason(tree(tag))).toBe(needs)
  })

  it('asks for one where nobody knows how dry it is, and where an overdue coat is still wet', () => {
    expect(needsReason(queueTreeFixture({ state: 'unknown' }))).toBe(true)
    expect(needsReason(queueTreeFixture({ state: 'overdue', warnings: [{ code: 'still wet', level: 'warn', text: 'Still wet.' }] }))).toBe(
      true,
    )
    expect(needsReason(queueTreeFixture({ state: 'bare wax' }))).toBe(false)
  })
})

describe('choices', () => {
  it('offer no stucco on a seal coat only', () => {
    expect(stuccoChoices([tree('T-118')])).not.toContain('none')
    expect(stuccoChoices([tree('T-116')])).toContain('none')
  })

  it('say what is not the recipe', () => {
    const draft = startDraft(run)!
    expect(deviationsOf(draft, run)).toEqual({ bath: false, stucco: false })
    expect(deviationsOf({ ...draft, stucco: 'fine' }, run)).toEqual({ bath: false, stucco: true })
    expect(deviationsOf(draft, [...run, tree('T-124')])).toEqual({ bath: true, stucco: true })
  })

  it('ask for the wall hygrometer where no sensor serves the place', () => {
    const ferryman = tree('T-116')
    const draft = startDraft([ferryman])!
    expect(needsWallReading(draft, [ferryman], queue.places)).toBe(true)
    expect(needsWallReading({ ...draft, placeId: tree('T-118').place.id }, [ferryman], queue.places)).toBe(false)
  })

  it('offer the next places along the rack', () => {
    expect(nearPlaces(queue.places, [tree('T-118')], 2).map((place) => place.name)).toEqual(['Rack B 3', 'Rack B 4'])
    expect(nearPlaces(queue.places, run, 1).map((place) => place.name)).toEqual(['Rack B 5'])
  })

  it('say the shared beginning of places once', () => {
    expect(backToWords(run)).toBe('Back to Rack B 2, B 3, B 4')
    expect(backToWords([run[0]!])).toBe('Rack B 2')
    expect(backToWords([run[0]!, tree('T-116')])).toBe('Back to Rack B 2, Net loft 2')
  })
})

describe('checkDial', () => {
  it('reads a comma as a point', () => {
    expect(checkDial('19,5', ' 66 ', 'degC').room).toEqual({ airTempC: 19.5, relHumidityPct: 66 })
  })

  it.each([
    ['', '66', 'degC', 'Temperature is a number in °C.', undefined],
    ['x', '66', 'degC', 'Temperature is a number in °C.', undefined],
    ['99', '66', 'degC', 'A shell room is not hotter than 60\u00A0°C.', undefined],
    ['−11', '66', 'degC', 'A shell room is not colder than -10\u00A0°C.', undefined],
    ['20', '120', 'degC', undefined, 'Humidity cannot be over 105 %.'],
    ['', '66', 'degF', 'Temperature is a number in °F.', undefined],
    ['141', '66', 'degF', 'A shell room is not hotter than 140\u00A0°F.', undefined],
    ['13', '66', 'degF', 'A shell room is not colder than 14\u00A0°F.', undefined],
  ] as const)('says what is wrong with %j and %j in %s', (temp, humidity, unit, tempError, humidityError) => {
    const { errors, room } = checkDial(temp, humidity, unit)
    expect(room).toBeNull()
    expect(errors.airTempC).toBe(tempError)
    expect(errors.relHumidityPct).toBe(humidityError)
  })

  it('takes what is typed in °F as °C, to the limits themselves', () => {
    expect(checkDial('70', '66', 'degF').room).toEqual({ airTempC: 21.11, relHumidityPct: 66 })
    expect(checkDial('140', '66', 'degF').room?.airTempC).toBe(60)
    expect(checkDial('14', '66', 'degF').room?.airTempC).toBe(-10)
  })
})

import { describe, expect, it } from 'vitest'
import { coatCells, coatsInShort, type CoatCells } from '@/lib/recipes/coat-cells'
import { hasDifferences, sameNeeds, versionDifferences } from '@/lib/recipes/version-differences'

const face = (changes: Partial<CoatCells> = {}): CoatCells => ({
  kind: 'face',
  bath: 'Face slurry',
  stucco: 'fine',
  need: '2.5',
  target: '10',
  guard: 'safe',
  drain: '75',
  longestWait: '24',
  prewet: 'no',
  readAloud: 'Break every bubble.',
  ...changes,
})
const backup = (changes: Partial<CoatCells> = {}): CoatCells =>
  face({ kind: 'backup', bath: 'Backup slurry', stucco: 'coarse', need: '4', guard: 'likely', drain: '40', longestWait: '72', ...changes })
const seal = (changes: Partial<CoatCells> = {}): CoatCells =>
  backup({ kind: 'seal', stucco: 'none', need: '12', target: '5', guard: 'safe', ...changes })

const medium = (need = '4') => backup({ stucco: 'medium', need, readAloud: 'Look into the undercuts.' })
const plain = [face(), medium(), backup(), backup({ need: '4.16' }), seal()]

/** One short word a coat: '2~1' is coat 2, formerly 1. */
const inShort = (before: CoatCells[], after: CoatCells[]) =>
  versionDifferences(before, after).map((difference) => {
    if (difference.what === 'added') return `+${difference.number}`
    if (difference.what === 'removed') return `-${difference.before}`
    const sign = { same: '=', changed: '~', moved: '>' }[difference.what]
    return `${difference.number}${sign}${difference.before}`
  })

describe('differences of two versions', () => {
  it('are none between a list and itself', () => {
    expect(inShort(plain, plain)).toEqual(['1=1', '2=2', '3=3', '4=4', '5=5'])
    expect(hasDifferences(versionDifferences(plain, plain))).toBe(false)
  })

  it('name each changed cell with what it was', () => {
    const after = plain.with(1, medium('4.5')).with(4, seal({ target: '4', drain: '50' }))
    expect(inShort(plain, after)).toEqual(['1=1', '2~2', '3=3', '4=4', '5~5'])
    expect(versionDifferences(plain, after).flatMap((each) => ('changes' in each ? each.changes : []))).toEqual([
      { key: 'need', before: '4', after: '4.5' },
      { key: 'target', before: '5', after: '4' },
      { key: 'drain', before: '40', after: '50' },
    ])
  })

  it('see a coat that was put in, and do not call the ones behind it changed', () => {
    const core = backup({ kind: 'core fill', need: '10', readAloud: 'Tamp it lightly.' })
    expect(inShort(plain, plain.toSpliced(2, 0, core))).toEqual(['1=1', '2=2', '+3', '4=3', '5=4', '6=5'])
  })

  it('see a coat that was taken out, at the place where it was', () => {
    expect(inShort(plain, plain.toSpliced(1, 1))).toEqual(['1=1', '-2', '2=3', '3=4', '4=5'])
  })

  it('take one more of a run for its last', () => {
    const run = [face(), backup(), backup(), seal()]
    expect(inShort(run, run.toSpliced(1, 0, backup()))).toEqual(['1=1', '2=2', '3=3', '+4', '5=4'])
  })

  it('see a coat that moved, whichever way, and what was changed on it', () => {
    const core = backup({ kind: 'core fill', need: '10', readAloud: 'Tamp it lightly.' })
    const before = [face(), medium(), core, backup(), backup({ need: '4.16' }), seal()]
    const later = [face(), medium(), backup(), backup({ need: '4.16' }), core, seal()]
    expect(inShort(before, later)).toEqual(['1=1', '2=2', '3=4', '4=5', '5>3', '6=6'])
    expect(inShort(later, before)).toEqual(['1=1', '2=2', '3>5', '4=3', '5=4', '6=6'])
    const longer = later.with(4, { ...core, need: '11' })
    expect(inShort(before, longer)).toContain('5>3')
    expect(versionDifferences(before, longer).find((each) => each.what === 'moved')).toMatchObject({
      changes: [{ key: 'need', before: '10', after: '11' }],
    })
  })

  it('see a coat that moved although another one of its run went', () => {
    const core = backup({ kind: 'core fill', need: '10', readAloud: 'Tamp it lightly.' })
    const run = [backup({ need: '4.33' }), backup({ need: '4.5' }), backup({ need: '4.68' })] as const
    const before = [face(), core, ...run, seal()]
    const after = [face(), run[0], run[1], core, seal()]
    expect(inShort(before, after)).toEqual(['1=1', '2=3', '3=4', '-5', '4>2', '5=6'])
  })

  it('call quite another coat in the same place another coat', () => {
    const core = backup({ kind: 'core fill', bath: 'Third slurry', stucco: 'fine', need: '10', readAloud: 'Tamp it lightly.' })
    expect(inShort(plain, plain.with(2, core))).toEqual(['1=1', '2=2', '-3', '+3', '4=4', '5=5'])
  })

  it('stand with empty lists', () => {
    expect(inShort([], [face()])).toEqual(['+1'])
    expect(inShort([face()], [])).toEqual(['-1'])
    expect(inShort([], [])).toEqual([])
  })

  it('account for every coat of both lists once, whatever the lists', () => {
    const kinds = [face(), medium(), backup(), seal(), backup({ need: '7' })]
    let state = 7
    const random = (below: number) => (state = (state * 48271) % 2147483647) % below
    for (let round = 0; round < 300; round += 1) {
      const list = () => Array.from({ length: random(9) }, () => kinds[random(kinds.length)]!)
      const before = list()
      const after = list()
      const differences = versionDifferences(before, after)
      const oldOnes = differences.flatMap((each) => ('before' in each ? [each.before] : []))
      const newOnes = differences.flatMap((each) => ('number' in each ? [each.number] : []))
      expect(oldOnes.toSorted((one, other) => one - other)).toEqual(before.map((_, index) => index + 1))
      expect(newOnes).toEqual(after.map((_, index) => index + 1))
    }
  })
})

describe('a calibration', () => {
  it('holds while nothing changes that a need rests on', () => {
    const after = plain.with(1, { ...medium(), drain: '55', guard: 'safe', longestWait: '48', readAloud: '' })
    expect(sameNeeds(plain, after)).toEqual([0, 1, 2, 3, 4])
  })

  it.each([
    ['need', { need: '4.1' }],
    ['target', { target: '8' }],
    ['stucco', { stucco: 'coarse' }],
    ['bath', { bath: 'Third slurry' }],
    ['kind', { kind: 'core fill' }],
    ['prewet', { prewet: 'yes' }],
  ])('ends for one coat with another %s, and holds for the others', (_, change) => {
    expect(sameNeeds(plain, plain.with(1, { ...medium(), ...change }))).toEqual([0, null, 2, 3, 4])
  })

  it('follows a coat to its new number, and a new coat has none', () => {
    expect(sameNeeds(plain, plain.toSpliced(1, 1))).toEqual([0, 2, 3, 4])
    const changed = { ...medium(), need: '9', drain: '70', longestWait: '10' }
    expect(sameNeeds(plain, plain.toSpliced(1, 0, changed)).filter((index) => index !== null)).toEqual([0, 1, 2, 3, 4])
  })
})

describe('a coat in words', () => {
  it('leaves out decimals that nobody waits for', () => {
    expect(
      coatCells({
        kind: 'backup',
        bathName: 'Backup slurry',
        stucco: 'coarse',
        needReferenceHours: 4 * 1.04 ** 3,
        moistureTarget: 0.07,
        guard: 'likely',
        drainSeconds: 40,
        longestWaitHours: 72,
        isPrewet: true,
        readAloud: '',
      }),
    ).toMatchObject({ need: '4.5', target: '7', drain: '40', longestWait: '72', prewet: 'yes' })
  })

  it('counts equal neighbours together, inner coat first', () => {
    const grades = (...list: [string, string][]) => coatsInShort(list.map(([kind, stucco]) => ({ kind, stucco }) as never))
    expect(
      grades(['face', 'fine'], ['face', 'fine'], ['backup', 'medium'], ['core fill', 'coarse'], ['backup', 'coarse'], ['seal', 'none']),
    ).toBe('2 fine, 1 medium, core fill, 1 coarse, seal')
    expect(grades()).toBe('')
  })
})

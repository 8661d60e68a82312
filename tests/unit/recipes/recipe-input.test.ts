import { describe, expect, it } from 'vitest'
import { coatValuesOf, cellsOfValues, nextCoatIndex, readRecipeForm, startingCoat, startingNeed } from '@/lib/recipes/recipe-form-values'
import { coatCells, type VersionCoat } from '@/lib/recipes/coat-cells'
import { recipeInput, recipeVersionInput } from '@/lib/recipes/recipe-input'
import { readVersion } from '@/lib/recipes/read-version'
import { fieldErrors } from '@/lib/trees/tree-form-values'

const FACE_BATH = '01990000-0000-7000-8000-000000000001'
const BACKUP_BATH = '01990000-0000-7000-8000-000000000002'
const BATHS = [
  { id: FACE_BATH, name: 'Face slurry', kind: 'face' as const, isRetired: false },
  { id: BACKUP_BATH, name: 'Backup slurry', kind: 'backup' as const, isRetired: false },
]

const face = { kind: 'face', bathId: FACE_BATH, stucco: 'fine', guard: 'safe' }
const backup = { kind: 'backup', bathId: BACKUP_BATH, stucco: 'coarse', guard: 'likely' }
const seal = { kind: 'seal', bathId: BACKUP_BATH, stucco: 'none', guard: 'safe' }
const figures = { needReferenceHours: '4', moistureTarget: '10', drainSeconds: '40', longestWaitHours: '72', readAloud: '' }

/** The form as a browser sends it. */
function form(coats: Record<string, string>[], rest: Record<string, string> = { name: 'Small work' }): FormData {
  const data = new FormData()
  for (const [name, value] of Object.entries(rest)) data.set(name, value)
  for (const [index, coat] of coats.entries()) {
    for (const [name, value] of Object.entries({ ...figures, ...coat })) data.set(`coats.${index}.${name}`, value)
  }
  return data
}

function complaintsOf(coats: Record<string, string>[]): Record<string, string> {
  const { name, note, coats: read } = readRecipeForm(form(coats))
  const { error } = recipeInput.safeParse({ name, note, coats: read })
  return error ? fieldErrors(error) : {}
}

describe('a recipe as typed', () => {
  it('becomes what is stored: percent as a share, a decimal comma as a point', () => {
    const { name, note, coats } = readRecipeForm(
      form([face, { ...backup, needReferenceHours: '4,16', moistureTarget: '7,5', isPrewet: 'on', readAloud: ' Edges twice. ' }, seal]),
    )
    const input = recipeInput.parse({ name, note, coats })
    expect(input).toMatchObject({ name: 'Small work', note: '' })
    expect(input.coats[1]).toEqual({
      kind: 'backup',
      bathId: BACKUP_BATH,
      stucco: 'coarse',
      guard: 'likely',
      needReferenceHours: 4.16,
      moistureTarget: 0.075,
      drainSeconds: 40,
      longestWaitHours: 72,
      isPrewet: true,
      readAloud: 'Edges twice.',
    })
    expect(input.coats[0]!.isPrewet).toBe(false)
  })

  it.each([
    ['a seal that is not last', [face, seal, backup], { 'coats.1.kind': 'The seal is the last coat.' }],
    [
      'two seals',
      [face, seal, seal],
      {
        'coats.1.kind': 'A shell has one seal, and it is the last coat.',
        'coats.2.kind': 'A shell has one seal, and it is the last coat.',
      },
    ],
    ['a coat without stucco', [face, { ...backup, stucco: 'none' }, seal], { 'coats.1.stucco': 'Only the seal goes without stucco.' }],
    ['a seal with stucco', [face, { ...seal, stucco: 'fine' }], { 'coats.1.stucco': 'A seal is slurry alone: no stucco.' }],
    ['no coat at all', [], { coats: 'A recipe has at least one coat.' }],
    ['41 coats', Array.from({ length: 41 }, () => backup), { coats: 'A recipe has at most 40 coats.' }],
    [
      'a need of nothing',
      [{ ...face, needReferenceHours: '0' }],
      { 'coats.0.needReferenceHours': 'The need is at least 0.1 reference hours.' },
    ],
    [
      'a need of weeks',
      [{ ...face, needReferenceHours: '200,5' }],
      { 'coats.0.needReferenceHours': 'The need is at most 200 reference hours.' },
    ],
    ['no need', [{ ...face, needReferenceHours: '' }], { 'coats.0.needReferenceHours': 'The need is a number.' }],
    [
      'a target of nothing',
      [{ ...face, moistureTarget: '0,5' }],
      { 'coats.0.moistureTarget': 'The target is at least 1 % of the coat’s water.' },
    ],
    ['a wet target', [{ ...face, moistureTarget: '51' }], { 'coats.0.moistureTarget': 'The target is at most 50 % of the coat’s water.' }],
    ['a target in words', [{ ...face, moistureTarget: 'dry' }], { 'coats.0.moistureTarget': 'The target is a number.' }],
    ['a drain before the dip', [{ ...face, drainSeconds: '-1' }], { 'coats.0.drainSeconds': 'The drain is at least 0 s.' }],
    ['a drain over ten minutes', [{ ...face, drainSeconds: '601' }], { 'coats.0.drainSeconds': 'The drain is at most 600 s.' }],
    ['half a second', [{ ...face, drainSeconds: '40,5' }], { 'coats.0.drainSeconds': 'The drain is in whole seconds.' }],
    ['no wait', [{ ...face, longestWaitHours: '0,5' }], { 'coats.0.longestWaitHours': 'The longest wait is at least 1 h.' }],
    ['a wait of months', [{ ...face, longestWaitHours: '721' }], { 'coats.0.longestWaitHours': 'The longest wait is at most 720 h.' }],
    ['no bath', [{ ...face, bathId: '' }], { 'coats.0.bathId': 'Choose a bath.' }],
  ])('is refused for %s, beside the field', (_, coats, complaints) => {
    expect(complaintsOf(coats)).toEqual(complaints)
  })

  it.each([
    ['0.1 reference hours', { needReferenceHours: '0.1' }],
    ['200 reference hours', { needReferenceHours: '200' }],
    ['a target of 1 %', { moistureTarget: '1' }],
    ['a target of 50 %', { moistureTarget: '50' }],
    ['no drain', { drainSeconds: '0' }],
    ['a drain of ten minutes', { drainSeconds: '600' }],
    ['a wait of an hour', { longestWaitHours: '1' }],
    ['a wait of a month', { longestWaitHours: '720' }],
  ])('may hold %s', (_, change) => {
    expect(complaintsOf([{ ...face, ...change }])).toEqual({})
  })

  it('may have 40 coats, and none of them a seal', () => {
    expect(complaintsOf(Array.from({ length: 40 }, () => backup))).toEqual({})
  })

  it('says of a further version why it is made', () => {
    const { note, from, follows, coats } = readRecipeForm(form([face, seal], { from: '1', follows: '2', note: ' ' }))
    const { error } = recipeVersionInput.safeParse({ note, from, follows, coats })
    expect(fieldErrors(error!)).toEqual({ note: 'Say in a few words why there is a new version.' })
  })
})

describe('rows of the form', () => {
  const stored: VersionCoat = {
    number: 4,
    kind: 'backup',
    bathId: BACKUP_BATH,
    bathName: 'Backup slurry',
    stucco: 'coarse',
    needReferenceHours: 4 * 1.04 ** 3,
    moistureTarget: 0.1,
    guard: 'likely',
    drainSeconds: 40,
    longestWaitHours: 72,
    isPrewet: true,
    readAloud: 'Edges twice.',
  }

  it('say the same as the coat they were filled from, so that an untouched row is no difference', () => {
    expect(cellsOfValues(coatValuesOf(stored), BATHS)).toEqual(coatCells(stored))
  })

  it('read figures however they are written, and keep what is not one', () => {
    const values = coatValuesOf(stored)
    expect(cellsOfValues({ ...values, needReferenceHours: ' 4,50 ', drainSeconds: 'long' }, BATHS)).toMatchObject({
      need: '4.5',
      drain: 'long',
    })
  })

  it('begin with our starting values', () => {
    const first = startingCoat('face', [], 0, BATHS)
    const second = startingCoat('face', [first], 1, BATHS)
    const third = startingCoat('backup', [first, second], 2, BATHS)
    const fourth = startingCoat('backup', [first, second, third], 3, BATHS)
    const last = startingCoat('seal', [first, second, third, fourth], 4, BATHS)
    const rows = [first, second, third, fourth, last]
    expect(rows.map((row) => row.needReferenceHours)).toEqual(['2.5', '3', '4', '4.16', '12'])
    expect(rows.map((row) => row.targetPct)).toEqual(['10', '10', '10', '10', '5'])
    expect(rows.map((row) => row.stucco)).toEqual(['fine', 'fine', 'coarse', 'coarse', 'none'])
    expect(rows.map((row) => row.bathId)).toEqual([FACE_BATH, FACE_BATH, BACKUP_BATH, BACKUP_BATH, BACKUP_BATH])
    expect(rows.map((_, index) => startingNeed(rows, index))).toEqual(['2.5', '3', '4', '4.16', '12'])
    expect(nextCoatIndex(rows)).toBe(4)
    expect(nextCoatIndex(rows.slice(0, 4))).toBe(4)
  })
})

describe('the number of a version in an address', () => {
  it.each([
    ['2', 2],
    ['0', null],
    ['02', null],
    ['2x', null],
    [undefined, null],
    [['1', '2'], null],
  ])('%s', (text, version) => {
    expect(readVersion(text)).toBe(version)
  })
})

import { describe, expect, it } from 'vitest'
import { fixedFields } from '@/lib/trees/fixed-fields'
import { fieldErrors, formValuesOf, keepFixed, readTreeForm } from '@/lib/trees/tree-form-values'
import { readTag } from '@/lib/trees/read-tag'
import { treeInput, treeInputIn } from '@/lib/trees/tree-input'

function form(fields: Record<string, string>): FormData {
  const data = new FormData()
  for (const [name, value] of Object.entries(fields)) data.set(name, value)
  return data
}

const whole = {
  tag: ' t-128 ',
  recipeVersionId: '01990000-0000-7000-8000-000000000001',
  placeId: '01990000-0000-7000-8000-000000000002',
  'pieces.0.workTitle': 'Kelp Bowl',
  'pieces.0.sectionName': '',
  'pieces.0.editionNumber': '3',
  'pieces.0.isRecast': 'on',
  'pieces.1.workTitle': 'Otter Gate',
  'pieces.1.sectionName': 'panel 2',
  'pieces.1.editionNumber': '1',
  waxMassKg: '3,2',
  cupKind: 'paper',
  cupVolumeL: '0.35',
  recessClass: 'none',
  spacing: 'open',
  hungMassKg: '',
  pourDate: '',
}

describe('readTreeForm', () => {
  it('makes an input that the tree accepts, decimal comma and small letters included', () => {
    const input = treeInput.parse(readTreeForm(form(whole)))
    expect(input).toMatchObject({ tag: 'T-128', waxMassKg: 3.2, cupVolumeL: 0.35, hungMassKg: null, pourDate: null })
    expect(input.pieces).toEqual([
      { workTitle: 'Kelp Bowl', sectionName: '', editionNumber: 3, isRecast: true },
      { workTitle: 'Otter Gate', sectionName: 'panel 2', editionNumber: 1, isRecast: false },
    ])
  })

  it('keeps what was typed, right or wrong', () => {
    expect(readTreeForm(form({ ...whole, waxMassKg: 'three' })).waxMassKg).toBe('three')
  })

  it('reads a bounded number of pieces', () => {
    const many: Record<string, string> = {}
    for (let index = 0; index < 500; index += 1) many[`pieces.${index}.workTitle`] = 'x'
    expect(readTreeForm(form(many)).pieces).toHaveLength(41)
  })
})

describe('fieldErrors', () => {
  it('gives one sentence a field, by its path', () => {
    const { error } = treeInput.safeParse(readTreeForm(form({ ...whole, waxMassKg: '', 'pieces.1.workTitle': ' ', tag: 'nope' })))
    expect(fieldErrors(error!)).toEqual({
      tag: 'A tag is one to three capital letters, a dash and a number, such as T-128.',
      'pieces.1.workTitle': 'Name the work.',
      waxMassKg: 'Wax mass is a number.',
    })
  })
})

describe('fixedFields', () => {
  it('fixes the tag always, and what the coats were worked out on once one is on', () => {
    expect(Object.keys(fixedFields(0))).toEqual(['tag'])
    expect(Object.keys(fixedFields(3)).toSorted()).toEqual(['pieces', 'placeId', 'recipeVersionId', 'tag'])
  })
  it('leaves open what no coat rests on', () => {
    const fixed = fixedFields(5)
    for (const field of ['pourDate', 'waxMassKg', 'cupKind', 'hungMassKg'] as const) expect(fixed[field]).toBeUndefined()
  })
})

describe('a known tree in its form', () => {
  const known: Parameters<typeof formValuesOf>[0] = {
    tree: { tag: 'T-122', place: { id: whole.placeId, name: 'Rack B 5' }, pourDate: null },
    recipe: { versionId: whole.recipeVersionId },
    waxMassKg: 3.2,
    cupKind: 'paper' as const,
    cupVolumeL: 0.35,
    recessClass: 'closed core' as const,
    spacing: 'open' as const,
    hungMassKg: null,
    pieces: [{ id: 'x', workId: 'w', workTitle: 'Otter Gate', sectionName: 'panel 2', editionNumber: 1, isRecast: false }],
  }
  const stored = formValuesOf(known, 'kg')

  it('goes through the form unchanged', () => {
    expect(treeInput.parse(stored)).toMatchObject({ tag: 'T-122', waxMassKg: 3.2, hungMassKg: null, pourDate: null })
  })

  it('goes through the form unchanged in pounds too, and is stored in kilograms', () => {
    const inPounds = formValuesOf({ ...known, hungMassKg: 31 }, 'lb')
    expect(inPounds).toMatchObject({ waxMassKg: '7.055', hungMassKg: '68.343' })
    expect(treeInputIn('lb').parse(inPounds)).toMatchObject({ waxMassKg: 3.2, hungMassKg: 31 })
  })

  it('says its limits in the unit that is typed', () => {
    const most = treeInputIn('lb').safeParse({ ...stored, waxMassKg: '1103', hungMassKg: '-1' })
    expect(fieldErrors(most.error!)).toEqual({ waxMassKg: 'Wax mass is at most 1,102 lb.', hungMassKg: 'Weight is more than 0 lb.' })
    expect(treeInputIn('lb').safeParse({ ...stored, waxMassKg: '1102' }).success).toBe(true)
    const { error } = treeInput.safeParse({ ...stored, waxMassKg: '501' })
    expect(fieldErrors(error!)).toEqual({ waxMassKg: 'Wax mass is at most 500 kg.' })
  })

  it('keeps what is fixed, whatever the form sends', () => {
    const typed = readTreeForm(form({ ...whole, tag: 'X-1', recessClass: 'none', waxMassKg: '4' }))
    const kept = keepFixed(typed, stored, fixedFields(2))
    expect(kept).toMatchObject({ tag: 'T-122', recessClass: 'none', waxMassKg: '4' })
    expect(kept.pieces).toEqual(stored.pieces)
    expect(keepFixed(typed, stored, fixedFields(0)).recessClass).toBe('none')
  })
})

describe('readTag', () => {
  it('reads a tag from an address and nothing else', () => {
    expect(readTag('T-122')).toBe('T-122')
    expect(readTag('t%2D7')).toBe('T-7')
    for (const wrong of ['new', '%', '122', 'T-1234567', '../T-1']) expect(readTag(wrong)).toBeNull()
  })
})

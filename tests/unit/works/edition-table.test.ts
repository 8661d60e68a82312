import { describe, expect, it } from 'vitest'
import type { TreeState } from '@/lib/trees/states'
import { openCast } from '@/lib/trees/open-cast'
import { editionTable, editionVerdict, recastWords, type Cast } from '@/lib/works/edition-table'
import { filterWorks } from '@/lib/works/filter-works'
import { workInput } from '@/lib/works/work-input'

const SECTIONS = [{ id: 'head' }, { id: 'body' }]

let at = 0
const cast = (sectionId: string, editionNumber: number, state: TreeState | null, tag = 'T-100', isRecast = false): Cast => ({
  pieceId: `piece ${(at += 1)}`,
  sectionId,
  editionNumber,
  createdAt: at,
  isRecast,
  tree: state === null ? null : { tag, state },
})

describe('the table of editions', () => {
  it('has a row for each edition that was begun, and names the sections that nobody has cast', () => {
    const rows = editionTable(SECTIONS, [cast('body', 10, 'wet'), cast('head', 2, 'drying'), cast('body', 2, 'released')])
    expect(rows.map(({ editionNumber, missing }) => [editionNumber, missing])).toEqual([
      [2, []],
      [10, ['head']],
    ])
    expect(rows[1]!.cells.map(({ missing }) => missing)).toEqual(['never cast', null])
  })

  it('does not take a scrapped shell for a section that is here', () => {
    const [row] = editionTable(SECTIONS, [cast('head', 1, 'scrapped', 'T-104'), cast('body', 1, 'ready for burnout')])
    expect(row!.missing).toEqual(['head'])
    expect(row!.cells[0]).toMatchObject({ standing: null, missing: 'scrapped', earlier: [{ tree: { tag: 'T-104' } }] })
  })

  it('stands on the newest cast, with those before it behind', () => {
    const casts = [cast('head', 3, 'scrapped', 'T-104'), cast('head', 3, 'wet', 'T-131', true), cast('body', 3, 'wet')]
    const [row] = editionTable(SECTIONS, casts.toReversed())
    expect(row!.missing).toEqual([])
    expect(row!.cells[0]).toMatchObject({ standing: { tree: { tag: 'T-131' } }, earlier: [{ tree: { tag: 'T-104' } }] })
  })

  it('falls back to the first cast when the recast was scrapped', () => {
    const [row] = editionTable(SECTIONS, [cast('head', 3, 'waiting', 'T-104'), cast('head', 3, 'scrapped', 'T-131', true)])
    expect(row!.cells[0]).toMatchObject({ standing: { tree: { tag: 'T-104' } }, missing: null })
  })

  it('takes a piece on no tree for one that is here', () => {
    expect(editionTable([{ id: 'head' }], [cast('head', 1, null)])[0]!.missing).toEqual([])
  })

  it('has no row where nothing was cast', () => {
    expect(editionTable(SECTIONS, [])).toEqual([])
  })
})

describe('what is said of the editions', () => {
  const whole = (number: number) => [cast('head', number, 'wet'), cast('body', number, 'wet')]
  it.each([
    ['none is begun', [], 8],
    ['edition 1 is whole', whole(1), null],
    ['edition 4 is not whole', [cast('head', 4, 'wet')], null],
    ['1 of 2 editions is whole; 6 more of 8 not begun', [...whole(1), cast('head', 2, 'wet')], 8],
    ['2 of 2 editions are whole', [...whole(1), ...whole(2)], 2],
  ])('%s', (words, casts, size) => {
    expect(editionVerdict(editionTable(SECTIONS, casts), size)).toBe(words)
  })

  it('tells a recast by what it replaces', () => {
    const recast = cast('head', 3, 'wet', 'T-131', true)
    expect(recastWords(cast('head', 3, 'wet'), null)).toBeNull()
    expect(recastWords(recast, cast('head', 3, 'scrapped', 'T-104'))).toBe('recast of edition 3, because T-104 was scrapped')
    expect(recastWords(recast, cast('head', 3, 'released', 'T-104'))).toBe('recast of edition 3, though T-104 still carries one')
    expect(recastWords(recast, null)).toBe('recast of edition 3')
  })
})

describe('a recast of what still hangs here', () => {
  const casts = [
    { workTitle: 'Otter Gate', sectionName: 'panel 2', editionNumber: 3, tag: 'T-104' },
    { workTitle: 'Otter Gate', sectionName: 'panel 2', editionNumber: 3, tag: 'T-131' },
    { workTitle: 'Kelp Bowl', sectionName: '', editionNumber: 1, tag: 'T-90' },
  ]
  const typed = (workTitle: string, sectionName: string, editionNumber: string) => ({
    workTitle,
    sectionName,
    editionNumber,
    isRecast: true,
  })

  it('names the newest tree that carries it', () => {
    expect(openCast(typed(' otter gate', 'Panel 2 ', '3'), casts)).toBe('T-131')
    expect(openCast(typed('Kelp Bowl', '', ' 1'), casts)).toBe('T-90')
  })

  it('is silent for another section, another number, or none', () => {
    expect(openCast(typed('Otter Gate', 'panel 3', '3'), casts)).toBeNull()
    expect(openCast(typed('Otter Gate', 'panel 2', '4'), casts)).toBeNull()
    expect(openCast(typed('Otter Gate', 'panel 2', ''), casts)).toBeNull()
  })
})

describe('finding a work', () => {
  const works = [
    { title: 'Otter Gate', sections: ['panel 1', 'panel 2'] },
    { title: 'Kelp Bowl', sections: [''] },
  ]
  it('looks at title and sections, every word, in any order', () => {
    expect(filterWorks(works, 'PANEL otter').map(({ title }) => title)).toEqual(['Otter Gate'])
    expect(filterWorks(works, 'bowl').map(({ title }) => title)).toEqual(['Kelp Bowl'])
    expect(filterWorks(works, 'bowl otter')).toEqual([])
    expect(filterWorks(works, '  ')).toHaveLength(2)
  })
})

describe('a work as typed', () => {
  it('may have no edition size', () => {
    expect(workInput.parse({ title: ' Otter Gate ', editionSize: '' })).toEqual({ title: 'Otter Gate', editionSize: null })
    expect(workInput.parse({ title: 'Otter Gate', editionSize: '8' }).editionSize).toBe(8)
  })

  it.each(['0', '2.5', '10000', 'eight'])('refuses an edition of %s', (editionSize) => {
    expect(workInput.safeParse({ title: 'Otter Gate', editionSize }).success).toBe(false)
  })
})

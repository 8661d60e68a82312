import { beforeAll, describe, expect, it } from 'vitest'
import { createTree } from '@/lib/commands/save-tree'
import { addSection, editWork, renameSection } from '@/lib/commands/save-work'
import { retireRecipe } from '@/lib/commands/save-recipe'
import { scrapTree } from '@/lib/commands/scrap-tree'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { loadTreeForm } from '@/lib/queries/tree-form'
import { loadWorkDetail } from '@/lib/queries/work-detail'
import { loadWorkList } from '@/lib/queries/work-list'
import { treeInput } from '@/lib/trees/tree-input'
import { editionTable } from '@/lib/works/edition-table'
import { FoundryEvent, RecipeVersion, Section, Work } from '@/models'
import { plansOf } from '@/tests/factories/plans'
import { buildFoundry, buildMember, buildRecipe, NOW, stoppedClock, type TestFoundry } from '@/tests/factories/shell-room'

let foundry: TestFoundry
let ines: Actor
let recipeVersionId: string

beforeAll(async () => {
  foundry = await buildFoundry()
  ines = await buildMember('supervisor', 'Ines')
  recipeVersionId = await buildRecipe(foundry)
})

const by = () => ({ member: ines, clock: stoppedClock() })
let tags = 100
let titles = 0
const title = () => `Otter Gate ${(titles += 1)}`

type TypedPiece = { workTitle: string; sectionName?: string; editionNumber?: string; isRecast?: boolean }

const treeOf = (pieces: TypedPiece[], { pourDate = '', versionId = recipeVersionId } = {}) =>
  createTree(
    treeInput.parse({
      tag: `W-${(tags += 1)}`,
      recipeVersionId: versionId,
      placeId: foundry.placeId,
      pieces: pieces.map((piece) => ({ sectionName: '', editionNumber: '1', isRecast: false, ...piece })),
      waxMassKg: '2',
      cupKind: 'wax',
      cupVolumeL: '0.3',
      recessClass: 'none',
      spacing: 'open',
      hungMassKg: '',
      pourDate,
    }),
    by(),
  )
const workOf = async (name: string) => (await Work.findOne({ where: { title: name }, rejectOnEmpty: true })).id
const detailOf = async (name: string) => (await loadWorkDetail({ workId: await workOf(name), clock: stoppedClock() }))!
const eventsOf = (workId: string) => FoundryEvent.findAll({ where: { subjectType: 'work', subjectId: workId }, order: [['id', 'ASC']] })

describe('a work', () => {
  it('shows every piece with the tree that carries it, several of them on one tree too', async () => {
    const workTitle = title()
    const { tag } = await treeOf([
      { workTitle, sectionName: 'panel 10' },
      { workTitle, sectionName: 'panel 2' },
    ])
    const other = await treeOf([{ workTitle, sectionName: 'panel 2', editionNumber: '2' }])
    const work = await detailOf(workTitle)
    expect(work.sections.map(({ name }) => name)).toEqual(['panel 2', 'panel 10'])
    const [first, second] = editionTable(work.sections, work.casts)
    expect(first!.cells.map(({ standing }) => standing?.tree?.tag)).toEqual([tag, tag])
    expect(second!.cells.map(({ standing }) => standing?.tree?.tag)).toEqual([other.tag, undefined])
    expect(second!.missing).toEqual([work.sections[1]!.id])
    expect(first!.cells[0]!.standing!.tree!.state).toBe('bare wax')
  })

  it('shows what was scrapped, and the recast that stands for it', async () => {
    const workTitle = title()
    const first = await treeOf([{ workTitle, editionNumber: '3' }])
    await scrapTree(first.treeId, 'Cracked.', by())
    expect(editionTable((await detailOf(workTitle)).sections, (await detailOf(workTitle)).casts)[0]!.missing).toHaveLength(1)
    const again = await treeOf([{ workTitle, editionNumber: '3', isRecast: true }])
    const work = await detailOf(workTitle)
    const [row] = editionTable(work.sections, work.casts)
    expect(row!.cells[0]).toMatchObject({
      standing: { isRecast: true, tree: { tag: again.tag } },
      earlier: [{ tree: { tag: first.tag, state: 'scrapped' } }],
      missing: null,
    })
  })

  it('is counted in the list, with its next pour', async () => {
    const workTitle = title()
    const gone = await treeOf([{ workTitle }], { pourDate: '2026-10-14' })
    await scrapTree(gone.treeId, 'Cracked.', by())
    await treeOf([{ workTitle, editionNumber: '2' }], { pourDate: '2026-10-22' })
    await treeOf(
      [
        { workTitle, editionNumber: '3' },
        { workTitle, sectionName: 'base', editionNumber: '3' },
      ],
      { pourDate: '2026-10-20' },
    )
    const { rows } = await loadWorkList({ query: workTitle, page: 1, size: 50 })
    expect(rows.find((work) => work.title === workTitle)).toMatchObject({
      sections: ['', 'base'],
      castCount: 4,
      openCount: 3,
      nextPour: '2026-10-20',
      editionSize: null,
    })
  })

  it('stands on its page of the list, found by title or section', async () => {
    for (const name of ['Kelp Bowl A', 'Kelp Bowl B', 'Kelp Bowl C']) await treeOf([{ workTitle: name, sectionName: 'rim' }])
    const list = (page: number, query = 'kelp rim') => loadWorkList({ query, page, size: 2 })
    const titlesOf = ({ rows }: Awaited<ReturnType<typeof list>>) => rows.map((work) => work.title)
    const [first, second, beyond] = await Promise.all([list(1), list(2), list(9)])
    expect(first).toMatchObject({ page: 1, pages: 2, total: await Work.count() })
    expect(titlesOf(first)).toEqual(['Kelp Bowl A', 'Kelp Bowl B'])
    expect(second.rows).toMatchObject([{ title: 'Kelp Bowl C', castCount: 1, openCount: 1 }])
    expect(beyond).toEqual(second)
    expect(await list(1, 'no such work')).toMatchObject({ rows: [], page: 1, pages: 1 })
  })

  it('costs the list the pieces of the works that are shown', async () => {
    const plans = await plansOf(() => loadWorkList({ query: 'kelp', page: 1, size: 2 }))
    const { plan } = plans.find(({ sql }) => sql.includes('JOIN pieces'))!
    expect(plan).toContain('pieces_section')
    expect(plan).not.toMatch(/SCAN (?:s|p|tp|t)\b/)
  })

  it('is not there under another address', async () => {
    expect(await loadWorkDetail({ workId: newId(), clock: stoppedClock() })).toBeNull()
  })
})

describe('an edition', () => {
  it('refuses numbers beyond its size beside the field, and does not shrink under what was cast', async () => {
    const workTitle = title()
    await treeOf([{ workTitle, editionNumber: '3' }])
    const workId = await workOf(workTitle)
    await expect(editWork(workId, { title: workTitle, editionSize: 2 }, by())).rejects.toMatchObject({
      extra: { fields: [{ path: 'editionSize', message: 'Number 3 was cast already: the edition has at least that many.' }] },
    })
    await editWork(workId, { title: workTitle, editionSize: 3 }, by())
    await expect(treeOf([{ workTitle }, { workTitle, editionNumber: '4' }])).rejects.toMatchObject({
      extra: { fields: [{ path: 'pieces.1.editionNumber', message: `${workTitle} is an edition of 3: there is no number 4.` }] },
    })
    await treeOf([{ workTitle, editionNumber: '2' }])
    expect((await loadTreeForm()).works.find((work) => work.title === workTitle)).toMatchObject({ editionSize: 3 })
  })

  it('lets a recast replace only what was cast, and the form knows what still hangs', async () => {
    const workTitle = title()
    await expect(treeOf([{ workTitle, editionNumber: '5', isRecast: true }])).rejects.toMatchObject({
      extra: { fields: [{ path: 'pieces.0.editionNumber' }] },
    })
    const first = await treeOf([{ workTitle, editionNumber: '5' }])
    const hanging = async () => (await loadTreeForm()).openCasts.filter((cast) => cast.workTitle === workTitle)
    expect(await hanging()).toEqual([{ workTitle, sectionName: '', editionNumber: 5, tag: first.tag }])
    await scrapTree(first.treeId, 'Cracked.', by())
    expect(await hanging()).toEqual([])
  })
})

describe('changing a work', () => {
  it('writes down what changed, and nothing where nothing did', async () => {
    const workTitle = title()
    await treeOf([{ workTitle }])
    const workId = await workOf(workTitle)
    await editWork(workId, { title: workTitle, editionSize: null }, by())
    expect(await eventsOf(workId)).toEqual([])
    await editWork(workId, { title: `${workTitle} (large)`, editionSize: 8 }, by())
    expect((await eventsOf(workId))[0]).toMatchObject({
      kind: 'work changed',
      memberId: ines.id,
      at: NOW,
      detail: { before: { title: workTitle, editionSize: null }, after: { title: `${workTitle} (large)`, editionSize: 8 } },
    })
  })

  it('refuses a title that another work has, capitals or not', async () => {
    const [one, other] = [title(), title()]
    await treeOf([{ workTitle: one }])
    await treeOf([{ workTitle: other }])
    await expect(editWork(await workOf(other), { title: one.toUpperCase(), editionSize: null }, by())).rejects.toMatchObject({
      extra: { fields: [{ path: 'title', message: `There is a work ${one} already.` }] },
    })
  })

  it('adds and renames sections, each name once', async () => {
    const workTitle = title()
    await treeOf([{ workTitle, sectionName: 'head' }])
    const workId = await workOf(workTitle)
    await addSection(workId, 'body', by())
    const body = await Section.findOne({ where: { workId, name: 'body' }, rejectOnEmpty: true })
    await expect(addSection(workId, 'Head', by())).rejects.toMatchObject({ extra: { fields: [{ path: 'name' }] } })
    await expect(renameSection(body.id, 'HEAD', by())).rejects.toMatchObject({ extra: { fields: [{ path: 'name' }] } })
    await expect(renameSection(body.id, '', by())).rejects.toMatchObject({ extra: { fields: [{ path: 'name' }] } })
    await expect(addSection(workId, '', by())).rejects.toMatchObject({ extra: { fields: [{ path: 'name' }] } })
    await renameSection(body.id, 'torso', by())
    expect((await detailOf(workTitle)).sections.map(({ name }) => name)).toEqual(['head', 'torso'])
    expect((await eventsOf(workId)).map(({ kind }) => kind)).toEqual(['section added', 'section renamed'])
    expect((await eventsOf(workId)).at(-1)!.detail).toMatchObject({ before: { section: 'body' }, after: { section: 'torso' } })
    // The edition that was whole misses the new section until it is cast.
    const work = await detailOf(workTitle)
    expect(editionTable(work.sections, work.casts)[0]!.missing).toEqual([body.id])
  })

  it('makes a demo work the foundry’s own', async () => {
    const [changed, left] = [newId(), newId()]
    await Work.create({ id: changed, title: title(), isDemo: true, createdAt: NOW })
    await Work.create({ id: left, title: title(), isDemo: true, createdAt: NOW })
    await editWork(changed, { title: title(), editionSize: 4 }, by())
    expect((await Work.findByPk(changed))!.isDemo).toBe(false)
    expect((await Work.findByPk(left))!.isDemo).toBe(true)
  })
})

describe('a tree on a retired recipe', () => {
  it('cannot be added', async () => {
    const versionId = await buildRecipe(foundry)
    await retireRecipe((await RecipeVersion.findByPk(versionId))!.recipeId, true, by())
    await expect(treeOf([{ workTitle: title() }], { versionId })).rejects.toMatchObject({
      extra: { fields: [{ path: 'recipeVersionId' }] },
    })
  })
})

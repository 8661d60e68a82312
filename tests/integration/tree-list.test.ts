import { beforeAll, describe, expect, it } from 'vitest'
import { loadGoneBehind, loadGoneTrees, loadReleasedSince, loadTreeList, type GoneKey } from '@/lib/queries/tree-list'
import { wordsOf } from '@/lib/trees/tree-view'
import { database, Tree, TreePiece, Work } from '@/models'
import { buildFoundry, buildRecipe, buildTree, HOUR, NOW, stoppedClock } from '@/tests/factories/shell-room'

const clock = stoppedClock()

const gone = (query = '', page = 1, size = 3) => loadGoneTrees({ words: wordsOf(query), page, size }, { clock })
const tags = (trees: { tag: string }[]) => trees.map((tree) => tree.tag)

beforeAll(async () => {
  const foundry = await buildFoundry()
  const recipeVersionId = await buildRecipe(foundry)
  for (let index = 1; index <= 8; index += 1) {
    const tree = await buildTree(foundry, { recipeVersionId })
    const left = index <= 5 ? { releasedAt: NOW - index * HOUR } : index === 6 ? { scrappedAt: NOW - 90 * 24 * HOUR } : {}
    await tree.update({ tag: `T-${index}`, ...left })
    const piece = await TreePiece.findOne({ where: { treeId: tree.id }, include: { association: 'piece', include: ['section'] } })
    await Work.update({ title: index === 4 ? '100% Gull' : `Work ${index}` }, { where: { id: piece?.piece?.section?.workId } })
  }
})

describe('loadTreeList', () => {
  it('holds what is on the floor', async () => {
    expect(tags(await loadTreeList({ clock }))).toEqual(['T-7', 'T-8'])
  })
})

describe('loadGoneTrees', () => {
  it('gives a page, newest first, and says whether there is another', async () => {
    const first = await gone()
    expect(tags(first.rows)).toEqual(['T-1', 'T-2', 'T-3'])
    expect(first.hasMore).toBe(true)
    const last = await gone('', 2)
    expect(tags(last.rows)).toEqual(['T-4', 'T-5', 'T-6'])
    expect(last.hasMore).toBe(false)
    expect(await gone('', 3)).toEqual({ rows: [], hasMore: false })
  })

  it('finds by tag and by piece, every word of them, and takes % and _ as they are', async () => {
    expect(tags((await gone('t-2')).rows)).toEqual(['T-2'])
    expect(tags((await gone('work 3')).rows)).toEqual(['T-3'])
    expect(tags((await gone('100% gull')).rows)).toEqual(['T-4'])
    expect(tags((await gone('1_0')).rows)).toEqual([])
    expect(tags((await gone("'; DROP TABLE trees; --")).rows)).toEqual([])
  })

  it('reads along the index, not through every tree', async () => {
    const [plan] = await database.query(
      'EXPLAIN QUERY PLAN SELECT id FROM trees t WHERE coalesce(t.scrapped_at, t.released_at) IS NOT NULL ORDER BY coalesce(t.scrapped_at, t.released_at) DESC LIMIT 3',
    )
    expect(JSON.stringify(plan)).toContain('trees_gone')
    expect(JSON.stringify(plan)).not.toContain('TEMP B-TREE')
  })
})

describe('loadGoneBehind', () => {
  const parts = async (most: number, between: (index: number) => Promise<unknown> = async () => null, query = '') => {
    const found: string[][] = []
    let behind: GoneKey | null = null
    do {
      const part: Awaited<ReturnType<typeof loadGoneBehind>> = await loadGoneBehind({ words: wordsOf(query), behind, most }, { clock })
      found.push(tags(part.rows))
      behind = part.next
      await between(found.length)
    } while (behind !== null)
    return found
  }

  it('gives the same trees in the same order as the pages, part by part', async () => {
    expect(await parts(3)).toEqual([
      ['T-1', 'T-2', 'T-3'],
      ['T-4', 'T-5', 'T-6'],
    ])
    expect(await parts(4, undefined, 'work')).toEqual([['T-1', 'T-2', 'T-3', 'T-5'], ['T-6']])
    expect(await parts(3, undefined, 'nothing of the kind')).toEqual([[]])
  })

  it('has every tree once, those that left at one instant too', async () => {
    const trees = await Tree.findAll({ where: { tag: ['T-2', 'T-3', 'T-4'] } })
    const then = trees.map((tree) => tree.releasedAt)
    for (const tree of trees) await tree.update({ releasedAt: NOW - 2 * HOUR })
    expect((await parts(2)).flat().toSorted()).toEqual(['T-1', 'T-2', 'T-3', 'T-4', 'T-5', 'T-6'])
    for (const [index, tree] of trees.entries()) await tree.update({ releasedAt: then[index]! })
  })

  it('doubles and skips none when a tree leaves meanwhile', async () => {
    const leaving = await Tree.findOne({ where: { tag: 'T-8' }, rejectOnEmpty: true })
    const found = await parts(2, (index) => (index === 1 ? leaving.update({ releasedAt: NOW }) : Promise.resolve()))
    await leaving.update({ releasedAt: null })
    expect(found.flat()).toEqual(['T-1', 'T-2', 'T-3', 'T-4', 'T-5', 'T-6'])
  })

  it('begins behind its key in the index', async () => {
    const [plan] = await database.query(
      `EXPLAIN QUERY PLAN SELECT id FROM trees t WHERE coalesce(t.scrapped_at, t.released_at) IS NOT NULL
          AND coalesce(t.scrapped_at, t.released_at) <= 9 AND (coalesce(t.scrapped_at, t.released_at) < 9 OR t.id < 'a')
        ORDER BY coalesce(t.scrapped_at, t.released_at) DESC, t.id DESC LIMIT 3`,
    )
    expect(JSON.stringify(plan)).toContain('SEARCH t USING INDEX trees_gone (<expr>')
  })
})

describe('loadReleasedSince', () => {
  it('leaves out what was scrapped and what is longer ago', async () => {
    expect(tags(await loadReleasedSince({ since: NOW - 3.5 * HOUR, most: 20 }, { clock }))).toEqual(['T-1', 'T-2', 'T-3'])
  })

  it('loses none to the trees that were scrapped since', async () => {
    const scrapped = await Tree.findAll({ where: { tag: ['T-1', 'T-2'] } })
    for (const tree of scrapped) await tree.update({ scrappedAt: NOW })
    expect(tags(await loadReleasedSince({ since: NOW - 6 * HOUR, most: 2 }, { clock }))).toEqual(['T-3', 'T-4'])
    for (const tree of scrapped) await tree.update({ scrappedAt: null })
  })
})

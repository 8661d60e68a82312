import { pourVerdict, type PourContext } from '@/lib/burnout/pour-verdict'
import { localDay } from '@/lib/format/local-time'
import { sortByDue, tagOrder, filterTrees, type TreeListRow } from '@/lib/trees/tree-list'
import { readTreeGroup, type TreeGroup } from '@/lib/trees/tree-groups'

/** Columns by which the list may stand; 'due' is the order of what asks for a hand. */
export const TREE_SORTS = ['due', 'tag', 'piece', 'coats', 'place', 'recipe', 'pour'] as const
export type TreeSort = (typeof TREE_SORTS)[number]

export const POUR_FILTERS = [
  { key: 'late', word: 'Will miss it, or passed' },
  { key: 'week', word: 'In the next 7 days' },
  { key: 'none', word: 'No date set' },
] as const
export type PourFilter = (typeof POUR_FILTERS)[number]['key']

/** What the list of trees shows; it stands in the address bar as a whole. */
export type TreeView = {
  query: string
  /** Null: all open trees. */
  group: TreeGroup | null
  recipe: string
  place: string
  pour: PourFilter | null
  sort: TreeSort
  isDescending: boolean
  /** From 1. */
  page: number
}

export const TREES_A_PAGE = 50

type Words = Readonly<Record<string, string | string[] | undefined>>

const first = (value: string | string[] | undefined) => (Array.isArray(value) ? value[0] : value) ?? ''

/** A view from the words of an address; what it does not know is left out, never refused. */
export function readTreeView(words: Words): TreeView {
  const page = Number(first(words['page']))
  return {
    query: first(words['q']).trim().slice(0, 80),
    group: readTreeGroup(first(words['state'])),
    recipe: first(words['recipe']).trim().slice(0, 60),
    place: first(words['place']).trim().slice(0, 40),
    pour: POUR_FILTERS.find(({ key }) => key === first(words['pour']))?.key ?? null,
    sort: TREE_SORTS.find((sort) => sort === first(words['sort'])) ?? 'due',
    isDescending: first(words['order']) === 'desc',
    page: Number.isInteger(page) && page >= 1 && page <= 10_000 ? page : 1,
  }
}

/**
 * The words of a view as they stand in an address: only what differs from the plain list.
 *
 * @example treeViewWords({ ...readTreeView({}), query: 'otter', page: 2 }).toString() // => 'q=otter&page=2'
 */
function treeViewWords(view: TreeView): URLSearchParams {
  const words = new URLSearchParams()
  const set = (name: string, value: string, isPlain: boolean) => {
    if (!isPlain) words.set(name, value)
  }
  set('q', view.query, view.query === '')
  set('state', view.group ?? '', view.group === null)
  set('recipe', view.recipe, view.recipe === '')
  set('place', view.place, view.place === '')
  set('pour', view.pour ?? '', view.pour === null)
  set('sort', view.sort, view.sort === 'due')
  set('order', 'desc', !view.isDescending)
  set('page', String(view.page), view.page === 1)
  return words
}

/** The address of the list with some of it changed. Any change but of the page leads to the first page. */
export function treeViewAddress(view: TreeView, changes: Partial<TreeView> = {}, path = '/trees'): string {
  const words = treeViewWords({ ...view, page: 1, ...changes })
  return words.size === 0 ? path : `${path}?${words}`
}

/** The words that somebody looks for, in small letters. */
export function wordsOf(query: string): string[] {
  return query.toLocaleLowerCase().split(/\s+/).filter(Boolean)
}

const byText = (one: string, other: string) => one.localeCompare(other, 'en', { numeric: true, sensitivity: 'base' })
// An empty day sorts behind every date.
const pourDay = (tree: TreeListRow) => tree.pourDate ?? '9999-12-31'

const COMPARE: Record<Exclude<TreeSort, 'due'>, (one: TreeListRow, other: TreeListRow) => number> = {
  tag: () => 0,
  piece: (one, other) => byText(one.title, other.title),
  coats: (one, other) => one.coatsOn - other.coatsOn,
  place: (one, other) => byText(one.place.name, other.place.name),
  recipe: (one, other) => byText(one.recipeLabel, other.recipeLabel),
  pour: (one, other) => (pourDay(one) < pourDay(other) ? -1 : pourDay(one) > pourDay(other) ? 1 : 0),
}

/** A new list in the order of a view; ties by tag, numbers as numbers. */
export function sortTrees(trees: readonly TreeListRow[], { sort, isDescending }: Pick<TreeView, 'sort' | 'isDescending'>): TreeListRow[] {
  const sorted =
    sort === 'due' ? sortByDue(trees) : trees.toSorted((one, other) => COMPARE[sort](one, other) || tagOrder(one.tag, other.tag))
  return isDescending ? sorted.toReversed() : sorted
}

/** Trees that a view shows, in its order, before it is cut into pages. */
export function viewTrees(trees: readonly TreeListRow[], view: TreeView, context: PourContext): TreeListRow[] {
  const shown = filterTrees(trees, view).filter(
    (tree) =>
      (view.recipe === '' || tree.recipeLabel === view.recipe) &&
      (view.place === '' || tree.place.name === view.place) &&
      (view.pour === null || isPouredSo(tree, view.pour, context)),
  )
  return sortTrees(shown, view)
}

function isPouredSo(tree: TreeListRow, filter: PourFilter, context: PourContext): boolean {
  if (filter === 'none') return tree.pourDate === null
  if (tree.pourDate === null) return false
  const verdict = pourVerdict(tree, context)
  if (filter === 'late') return verdict === 'will miss' || verdict === 'passed'
  const today = localDay(context.now, context.timeZone)
  return tree.pourDate >= today && tree.pourDate <= dayAfter(today, 7)
}

function dayAfter(day: string, days: number): string {
  return new Date(Date.parse(`${day}T00:00:00Z`) + days * 86_400_000).toISOString().slice(0, 10)
}

/** One page of a list, how many pages and how many rows there are. A page beyond the last gives the last. */
export function cutPage<Row>(
  rows: readonly Row[],
  page: number,
  size: number,
): { rows: Row[]; page: number; pages: number; total: number } {
  const pages = Math.max(1, Math.ceil(rows.length / size))
  const shown = Math.min(page, pages)
  return { rows: rows.slice((shown - 1) * size, shown * size), page: shown, pages, total: rows.length }
}

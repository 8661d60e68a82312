import type { Metadata } from 'next'
import Link from 'next/link'
import { Icon } from '@/app/_components/icons'
import { KeyLink } from '@/app/_components/key'
import { ShellSection } from '@/app/_components/shell-section'
import { KeepFresh } from '@/app/(office)/_components/keep-fresh'
import { TreeFilter } from '@/app/(office)/trees/_components/tree-filter'
import { TreeTable } from '@/app/(office)/trees/_components/tree-table'
import { systemClock } from '@/lib/core/clock'
import { may } from '@/lib/members/roles'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { loadGoneTrees, loadTreeList } from '@/lib/queries/tree-list'
import { requireMemberPage } from '@/lib/server/auth'
import { TREE_GROUPS } from '@/lib/trees/tree-groups'
import { countGroups, type TreeListRow } from '@/lib/trees/tree-list'
import { cutPage, readTreeView, treeViewAddress, TREES_A_PAGE, viewTrees, wordsOf, type TreeView } from '@/lib/trees/tree-view'

export const metadata: Metadata = { title: 'Trees' }

const namesOf = (trees: readonly TreeListRow[], name: (tree: TreeListRow) => string) =>
  [...new Set(trees.map(name))].toSorted((one, other) => one.localeCompare(other, 'en'))

export default async function TreesPage({ searchParams }: PageProps<'/trees'>) {
  const member = await requireMemberPage('see', '/trees')
  const view = readTreeView(await searchParams)
  const [trees, { timeZone, calendar }] = await Promise.all([loadTreeList({ clock: systemClock }), loadFoundry()])
  const context = { now: systemClock.now(), timeZone, calendar }
  const mayAdd = may(member.role, 'trees')
  const isGone = view.group === 'gone'
  const gone = isGone
    ? await loadGoneTrees({ words: wordsOf(view.query), page: view.page, size: TREES_A_PAGE }, { clock: systemClock })
    : null
  const shown = gone === null ? cutPage(viewTrees(trees, view, context), view.page, TREES_A_PAGE) : null
  const rows = gone?.rows ?? shown?.rows ?? []

  if (trees.length === 0 && !isGone && view.query === '') return <NoTrees mayAdd={mayAdd} />

  const counts = countGroups(trees, view.query)
  const isFiltered = view.query !== '' || view.recipe !== '' || view.place !== '' || view.pour !== null || view.group !== null
  return (
    <>
      <KeepFresh />
      <div className="page-head">
        <div className="min-w-0 grow">
          <h1>{headline(isFiltered ? (shown?.total ?? null) : null, trees.length)}</h1>
          <p>What asks for a hand first, then what dries, by its time.</p>
        </div>
        <span className="no-print flex flex-wrap gap-2">
          <a className="key" href={treeViewAddress({ ...view, page: 1 }, {}, '/api/v1/trees.csv')} download>
            This list as CSV
          </a>
          {mayAdd && (
            <KeyLink href="/trees/new" tone="go" icon="plus">
              Add a tree
            </KeyLink>
          )}
        </span>
      </div>
      <div className="tree-filter no-print">
        <TreeFilter view={view} recipes={namesOf(trees, (tree) => tree.recipeLabel)} places={namesOf(trees, (tree) => tree.place.name)} />
        <nav aria-label="Trees by state">
          <GroupLink word="All open" view={view} group={null} count={counts.get(null)} />
          {TREE_GROUPS.map(({ key, word }) => (
            <GroupLink key={key} word={word} view={view} group={key} count={counts.get(key)} />
          ))}
        </nav>
      </div>
      {rows.length === 0 ? (
        <section className="plate">
          <div className="plate-body flex flex-wrap items-center gap-4">
            <p className="text-18">{view.query === '' ? 'No tree stands here now.' : `No tree here carries “${view.query}”.`}</p>
            {view.query !== '' && !isGone && (
              <KeyLink href={treeViewAddress(view, { group: 'gone', recipe: '', place: '', pour: null })}>
                Look among those that left
              </KeyLink>
            )}
            {isFiltered && <KeyLink href="/trees">Show all open trees</KeyLink>}
          </div>
        </section>
      ) : (
        <TreeTable trees={rows} context={context} view={view} />
      )}
      <Pager view={{ ...view, page: shown?.page ?? view.page }} pages={shown?.pages ?? null} hasMore={gone?.hasMore ?? false} />
    </>
  )
}

/** How many stand on the floor, and how many of them are shown; null where all are, or where nobody counts. */
function headline(shownCount: number | null, floorCount: number): string {
  if (shownCount !== null) return `${shownCount} of ${floorCount === 1 ? '1 tree' : `${floorCount} trees`} on the floor`
  if (floorCount === 0) return 'No tree on the floor'
  return floorCount === 1 ? '1 tree on the floor' : `${floorCount} trees on the floor`
}

function GroupLink({ word, view, group, count }: { word: string; view: TreeView; group: TreeView['group']; count: number | undefined }) {
  const isCurrent = group === view.group
  return (
    <Link className="group-link" href={treeViewAddress(view, { group })} prefetch={false} aria-current={isCurrent ? 'page' : undefined}>
      {isCurrent && <Icon name="check" />}
      {word} {count !== undefined && <span className="num">{count}</span>}
    </Link>
  )
}

/** Earlier and later pages. Of the trees that left nobody counts the pages, so their foot says only whether there is another. */
function Pager({ view, pages, hasMore }: { view: TreeView; pages: number | null; hasMore: boolean }) {
  const hasNext = pages === null ? hasMore : view.page < pages
  if (view.page === 1 && !hasNext) return null
  return (
    <nav className="pager no-print" aria-label="Pages of the list">
      {view.page > 1 && (
        <KeyLink icon="back" href={treeViewAddress(view, { page: view.page - 1 })}>
          Page before
        </KeyLink>
      )}
      <span className="num">
        Page {view.page}
        {pages !== null && ` of ${pages}`}
      </span>
      {hasNext && <KeyLink href={treeViewAddress(view, { page: view.page + 1 })}>Next page</KeyLink>}
    </nav>
  )
}

function NoTrees({ mayAdd }: { mayAdd: boolean }) {
  return (
    <div className="flex max-w-[760px] flex-col items-start gap-5 py-12">
      <ShellSection
        coats={(['fine', 'fine', 'medium', 'medium', 'coarse', 'coarse', 'coarse', 'seal'] as const).map((grade) => ({ grade }))}
        done={0}
        open={null}
        state="bare"
        target={0.9}
        height={72}
        width={520}
        className="h-auto max-w-full"
        isDecoration
      />
      <h1 className="text-44">No tree on the floor</h1>
      <p className="max-w-[54ch] text-20">
        A tree is one or more waxes on a cup. Once it is here with its recipe and its place, the floor says when to dip it, and where.
      </p>
      <span className="flex flex-wrap gap-3">
        {mayAdd && (
          <KeyLink href="/trees/new" size={56} tone="go" icon="plus">
            Add a tree
          </KeyLink>
        )}
        <KeyLink href="/trees?state=gone" size={56}>
          Trees that left
        </KeyLink>
      </span>
      {!mayAdd && <p className="text-18">A supervisor adds trees.</p>}
    </div>
  )
}

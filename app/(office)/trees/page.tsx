import type { Metadata } from 'next'
import Link from 'next/link'
import { KeyLink } from '@/app/_components/key'
import { Icon } from '@/app/_components/icons'
import { KeepFresh } from '@/app/(office)/_components/keep-fresh'
import { TreeTable } from '@/app/(office)/trees/_components/tree-table'
import { ShellSection } from '@/app/_components/shell-section'
import { systemClock } from '@/lib/core/clock'
import { may } from '@/lib/members/roles'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { loadTreeList } from '@/lib/queries/tree-list'
import { requireMemberPage } from '@/lib/server/auth'
import { readTreeGroup, TREE_GROUPS, type TreeGroup } from '@/lib/trees/tree-groups'
import { countGroups, filterTrees, sortByDue } from '@/lib/trees/tree-list'

export const metadata: Metadata = { title: 'Trees' }

const first = (value: string | string[] | undefined) => (Array.isArray(value) ? value[0] : value)

function listAddress(query: string, group: TreeGroup | null): string {
  const words = new URLSearchParams()
  if (query !== '') words.set('q', query)
  if (group !== null) words.set('state', group)
  return words.size === 0 ? '/trees' : `/trees?${words}`
}

export default async function TreesPage({ searchParams }: PageProps<'/trees'>) {
  const member = await requireMemberPage('see', '/trees')
  const words = await searchParams
  const query = (first(words['q']) ?? '').trim().slice(0, 80)
  const group = readTreeGroup(first(words['state']))
  const [trees, { timeZone, calendar }] = await Promise.all([loadTreeList({ clock: systemClock }), loadFoundry()])
  const now = systemClock.now()
  const rows = sortByDue(filterTrees(trees, { query, group }))
  const counts = countGroups(trees, query)
  const open = filterTrees(trees, { query: '', group: null }).length
  const mayAdd = may(member.role, 'trees')

  if (trees.length === 0) return <NoTrees mayAdd={mayAdd} />

  return (
    <>
      <KeepFresh />
      <div className="page-head">
        <div className="min-w-0 grow">
          <h1>{open === 0 ? 'No tree on the floor' : open === 1 ? '1 tree on the floor' : `${open} trees on the floor`}</h1>
          <p>What asks for a hand first, then what dries, by its time.</p>
        </div>
        {mayAdd && (
          <KeyLink href="/trees/new" tone="go" icon="plus">
            Add a tree
          </KeyLink>
        )}
      </div>
      <div className="tree-filter">
        <form action="/trees" role="search">
          {group !== null && <input type="hidden" name="state" value={group} />}
          <label className="label" htmlFor="find-tree">
            Find a tree
          </label>
          <span className="flex gap-2">
            <input
              id="find-tree"
              className="input"
              type="search"
              name="q"
              defaultValue={query}
              maxLength={80}
              placeholder="tag, piece or place"
              autoComplete="off"
            />
            <button type="submit" className="key">
              Find
            </button>
          </span>
        </form>
        <nav aria-label="Trees by state">
          <GroupLink word="All open" href={listAddress(query, null)} count={counts.get(null) ?? 0} isCurrent={group === null} />
          {TREE_GROUPS.map(({ key, word }) => (
            <GroupLink key={key} word={word} href={listAddress(query, key)} count={counts.get(key) ?? 0} isCurrent={group === key} />
          ))}
        </nav>
      </div>
      {rows.length === 0 ? (
        <section className="plate">
          <div className="plate-body flex flex-wrap items-center gap-4">
            <p className="text-18">{query === '' ? 'No tree stands here now.' : `No tree here carries “${query}”.`}</p>
            <KeyLink href="/trees">Show all open trees</KeyLink>
          </div>
        </section>
      ) : (
        <TreeTable trees={rows} context={{ now, timeZone, calendar }} />
      )}
    </>
  )
}

function GroupLink({ word, href, count, isCurrent }: { word: string; href: string; count: number; isCurrent: boolean }) {
  return (
    <Link className="group-link" href={href} prefetch={false} aria-current={isCurrent ? 'page' : undefined}>
      {isCurrent && <Icon name="check" />}
      {word} <span className="num">{count}</span>
    </Link>
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
      <h1 className="text-44">No tree yet</h1>
      <p className="max-w-[54ch] text-20">
        A tree is one or more waxes on a cup. Once it is here with its recipe and its place, the floor says when to dip it, and where.
      </p>
      {mayAdd ? (
        <KeyLink href="/trees/new" size={56} tone="go" icon="plus">
          Add the first tree
        </KeyLink>
      ) : (
        <p className="text-18">A supervisor adds trees.</p>
      )}
    </div>
  )
}

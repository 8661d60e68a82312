import type { Metadata } from 'next'
import Link from 'next/link'
import { DemoMark } from '@/app/_components/demo-mark'
import { KeyLink } from '@/app/_components/key'
import { EmptyState } from '@/app/(office)/_components/empty-state'
import { formatDay } from '@/lib/format/local-time'
import { may } from '@/lib/members/roles'
import { loadWorkList, type WorkListRow } from '@/lib/queries/work-list'
import { requireMemberPage } from '@/lib/server/auth'
import '@/app/(office)/works/works.css'

export const metadata: Metadata = { title: 'Works' }

const WORKS_A_PAGE = 50

export default async function WorksPage({ searchParams }: PageProps<'/works'>) {
  const member = await requireMemberPage('see', '/works')
  const { q, page: asked } = await searchParams
  const query = (typeof q === 'string' ? q : '').trim().slice(0, 80)
  const { total, rows, page, pages } = await loadWorkList({ query, page: readPage(asked), size: WORKS_A_PAGE })
  if (total === 0) {
    return (
      <EmptyState
        title="No work yet"
        action={
          may(member.role, 'trees') ? (
            <KeyLink href="/trees/new" size={56} tone="go" icon="plus">
              Add the first tree
            </KeyLink>
          ) : (
            <p>A supervisor adds trees.</p>
          )
        }
      >
        A work is a sculpture, with its sections and its edition. It comes with the first tree that carries a piece of it, and then this
        page says which pieces are here and which are missing.
      </EmptyState>
    )
  }
  return (
    <>
      <div className="page-head">
        <div className="min-w-0 grow">
          <h1>{total === 1 ? '1 work' : `${total} works`}</h1>
          <p>Open a work to see whether every section of an edition is here, and how far.</p>
        </div>
      </div>
      <div className="tree-filter">
        <form action="/works" role="search">
          <label className="label" htmlFor="find-work">
            Find a work
          </label>
          <span className="flex gap-2">
            <input
              id="find-work"
              className="input"
              type="search"
              name="q"
              defaultValue={query}
              maxLength={80}
              placeholder="title or section"
              autoComplete="off"
            />
            <button type="submit" className="key">
              Find
            </button>
          </span>
        </form>
      </div>
      {rows.length === 0 ? (
        <section className="plate">
          <div className="plate-body flex flex-wrap items-center gap-4">
            <p className="text-18">No work here carries “{query}”.</p>
            <KeyLink href="/works">Show all works</KeyLink>
          </div>
        </section>
      ) : (
        <section className="plate" aria-label="Works">
          <ul className="work-rows">
            {rows.map((work) => (
              <WorkRow key={work.id} work={work} />
            ))}
          </ul>
        </section>
      )}
      {pages > 1 && (
        <nav className="pager no-print" aria-label="Pages of the list">
          {page > 1 && (
            <KeyLink icon="back" href={pageAddress(query, page - 1)}>
              Page before
            </KeyLink>
          )}
          <span className="num">
            Page {page} of {pages}
          </span>
          {page < pages && <KeyLink href={pageAddress(query, page + 1)}>Next page</KeyLink>}
        </nav>
      )}
    </>
  )
}

function readPage(asked: string | string[] | undefined): number {
  const page = Number(asked)
  return Number.isInteger(page) && page >= 1 ? page : 1
}

const pageAddress = (query: string, page: number) =>
  `/works?${new URLSearchParams({ ...(query === '' ? {} : { q: query }), page: String(page) })}`

function WorkRow({ work }: { work: WorkListRow }) {
  const named = work.sections.filter(Boolean)
  return (
    <li className="link-row">
      <div className="work-row-title">
        {/* The link covers its whole row. */}
        <Link className="row-link" href={`/works/${work.id}`} prefetch={false}>
          {work.title}
        </Link>
        <span className="text-soot">
          {work.isDemo && <DemoMark />}{' '}
          {named.length === 0 ? 'cast in one' : named.length === 1 ? named[0] : `${named.length} sections: ${named.join(', ')}`}
        </span>
      </div>
      <p>{work.editionSize === null ? <span className="text-soot">no edition size</span> : `edition of ${work.editionSize}`}</p>
      <p>
        <span className="num">{work.castCount}</span> {work.castCount === 1 ? 'piece' : 'pieces'} cast,{' '}
        <span className="num">{work.openCount}</span> open
      </p>
      <p className="work-row-pour">
        {work.nextPour === null ? <span className="text-soot">no pour date</span> : `next pour ${formatDay(work.nextPour)}`}
      </p>
    </li>
  )
}

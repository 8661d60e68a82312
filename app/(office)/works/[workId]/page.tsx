import type { Metadata } from 'next'
import { notFound } from 'next/navigation'
import { DemoMark } from '@/app/_components/demo-mark'
import { StateMark } from '@/app/_components/state-mark'
import { fittedTagHeight, Tag } from '@/app/_components/tag'
import { KeepFresh } from '@/app/(office)/_components/keep-fresh'
import { EditionTable } from '@/app/(office)/works/[workId]/_components/edition-table'
import { WorkActs } from '@/app/(office)/works/[workId]/_components/work-acts'
import { systemClock } from '@/lib/core/clock'
import { formatDay } from '@/lib/format/local-time'
import { may } from '@/lib/members/roles'
import { loadWorkDetail, type WorkCast } from '@/lib/queries/work-detail'
import { requireMemberPage } from '@/lib/server/auth'
import { editionTable, editionVerdict, recastWords } from '@/lib/works/edition-table'
import { sectionWord } from '@/lib/works/section-word'
import '@/app/(office)/works/works.css'

export const metadata: Metadata = { title: 'Work' }

export default async function WorkPage({ params }: PageProps<'/works/[workId]'>) {
  const { workId } = await params
  const member = await requireMemberPage('see', `/works/${encodeURIComponent(workId)}`)
  const work = await loadWorkDetail({ workId, clock: systemClock })
  if (work === null) notFound()
  const now = systemClock.now()
  const rows = editionTable(work.sections, work.casts)
  const open = work.casts.filter(({ tree }) => tree !== null && tree.state !== 'released' && tree.state !== 'scrapped')
  const nextPour = open.flatMap(({ tree }) => tree?.pourDate ?? []).toSorted()[0] ?? null
  const castOf = new Map(work.casts.map((cast) => [cast.pieceId, cast]))
  return (
    <article>
      <KeepFresh />
      <div className="page-head">
        <div className="min-w-0 grow">
          <h1 className="[overflow-wrap:anywhere]">
            {work.title} {work.isDemo && <DemoMark />}
          </h1>
          <p>
            {[
              work.sections.length === 1 ? sectionWord(work.sections[0]?.name ?? '') : `${work.sections.length} sections`,
              work.editionSize === null ? 'no edition size' : `edition of ${work.editionSize}`,
              `${work.casts.length} ${work.casts.length === 1 ? 'piece' : 'pieces'} cast, ${open.length} open`,
              nextPour === null ? 'no pour date' : `next pour ${formatDay(nextPour)}`,
            ].join(' · ')}
          </p>
        </div>
        {may(member.role, 'works') && (
          <WorkActs workId={work.id} title={work.title} editionSize={work.editionSize} sections={work.sections} />
        )}
      </div>

      <section className="plate">
        <header>
          <h2>Is every section here?</h2>
          <p>{editionVerdict(rows, work.editionSize)}</p>
        </header>
        {rows.length === 0 ? (
          <p className="plate-body text-soot">No piece of this work was cast yet.</p>
        ) : (
          <EditionTable rows={rows} sections={work.sections} now={now} />
        )}
      </section>

      <div className="section-plates">
        {work.sections.map((section) => (
          <section key={section.id} className="plate">
            <header>
              <h2>{sectionWord(section.name)}</h2>
              <p>every cast of it</p>
            </header>
            <SectionCasts casts={work.casts.filter((cast) => cast.sectionId === section.id)} castOf={castOf} now={now} />
          </section>
        ))}
      </div>
    </article>
  )
}

function SectionCasts({ casts, castOf, now }: { casts: readonly WorkCast[]; castOf: ReadonlyMap<string, WorkCast>; now: number }) {
  if (casts.length === 0) return <p className="plate-body text-soot">Never cast yet.</p>
  const inOrder = casts.toSorted((one, other) => one.editionNumber - other.editionNumber || one.createdAt - other.createdAt)
  return (
    <ul className="cast-rows">
      {inOrder.map((cast) => {
        const recast = recastWords(cast, cast.recastOf === null ? null : (castOf.get(cast.recastOf) ?? null))
        return (
          <li key={cast.pieceId}>
            <b>Edition {cast.editionNumber}</b>
            {cast.tree === null ? (
              <span className="text-soot">on no tree</span>
            ) : (
              <span className="cast-tree">
                <Tag tag={cast.tree.tag} height={fittedTagHeight(cast.tree.tag, 32)} isHeld={cast.tree.state === 'held'} isLink />
                <StateMark state={cast.tree.state} since={cast.tree.stateSince} now={now} />
              </span>
            )}
            {recast !== null && <span className="cast-why">{recast}</span>}
          </li>
        )
      })}
    </ul>
  )
}

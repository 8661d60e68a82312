import type { Metadata } from 'next'
import Link from 'next/link'
import type { ReactNode } from 'react'
import { DemoMark } from '@/app/_components/demo-mark'
import { Icon } from '@/app/_components/icons'
import { KeyLink } from '@/app/_components/key'
import { StateMark } from '@/app/_components/state-mark'
import { fittedTagHeight, Tag } from '@/app/_components/tag'
import { TimePair } from '@/app/_components/time-pair'
import { Caution } from '@/app/(office)/_components/caution'
import { NOT_CALIBRATED } from '@/app/(office)/_components/due-words'
import { KeepFresh } from '@/app/(office)/_components/keep-fresh'
import { MissMark, PourWords } from '@/app/(office)/_components/pour-words'
import { ReasonForm } from '@/app/(office)/_components/reason-form'
import { TreeSection } from '@/app/(office)/_components/tree-section'
import { withdrawReleaseAction } from '@/app/(office)/burnout/actions'
import { ReleasePlate } from '@/app/(office)/burnout/_components/release-plate'
import { WayToKiln } from '@/app/(office)/burnout/_components/way-to-kiln'
import { burnoutHeadline, groupForBurnout, inTheWay, type InTheWay } from '@/lib/burnout/burnout-groups'
import { pourVerdict, type PourContext } from '@/lib/burnout/pour-verdict'
import { blockingChecks } from '@/lib/burnout/release-key'
import { systemClock } from '@/lib/core/clock'
import { coatsOnWords } from '@/lib/format/coat-words'
import { formatMoment } from '@/lib/format/local-time'
import { may } from '@/lib/members/roles'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { loadReleaseChecks } from '@/lib/queries/release-checks'
import { loadReleasedSince, loadTreeList } from '@/lib/queries/tree-list'
import type { QueueTree } from '@/lib/queue/contract'
import { requireMemberPage } from '@/lib/server/auth'

export const metadata: Metadata = { title: 'Burnout' }

/** Released trees stay here to be taken back for this long; the list of trees keeps them longer. */
const RECENT_MS = 7 * 86_400_000
const MOST_RELEASED = 20

export default async function BurnoutPage() {
  const member = await requireMemberPage('see', '/burnout')
  const [trees, { timeZone, calendar }] = await Promise.all([loadTreeList({ clock: systemClock }), loadFoundry()])
  const context: PourContext = { now: systemClock.now(), timeZone, calendar }
  const finished = trees.filter((tree) => tree.state === 'ready for burnout' || tree.state === 'dried out')
  const checks =
    finished.length === 0
      ? {}
      : await loadReleaseChecks(
          finished.map((tree) => tree.id),
          { clock: systemClock },
        )
  const groups = groupForBurnout(trees, checks)
  const stands = inTheWay(groups, context)
  const mayRelease = may(member.role, 'release')
  const rows = [...groups.ready, ...groups.toConfirm].map((tree) => ({
    tree,
    checks: checks[tree.id] ?? [],
    verdict: pourVerdict(tree, context),
  }))
  const released = await loadReleasedSince({ since: context.now - RECENT_MS, most: MOST_RELEASED + 1 }, { clock: systemClock })
  const { now } = context

  return (
    <>
      <KeepFresh />
      <div className="page-head">
        <h1>{burnoutHeadline(groups.ready.length)}</h1>
        <p className="stands">
          {stands.length === 0 ? (
            rows.length > 0 ? (
              'Nothing stands in the way.'
            ) : (
              'No shell is near the kiln yet.'
            )
          ) : (
            <>
              In the way:{' '}
              {stands.map((line, index) => (
                <b key={line.code}>
                  <StandsMark code={line.code} /> {line.text}
                  {index < stands.length - 1 ? ', ' : '.'}
                </b>
              ))}
            </>
          )}
        </p>
      </div>
      <WayToKiln trees={[...groups.lastCoatOn, ...groups.stillDipped]} context={context} />
      <div className="burnout-columns">
        <div className="tree-column">
          <section className="plate">
            <header>
              <h2>Ready for burnout</h2>
              <p>{mayRelease ? 'tick what goes, then hold the key' : 'a supervisor releases them'}</p>
            </header>
            {rows.length === 0 ? (
              <p className="plate-body text-soot">No shell is dried out and looked over.</p>
            ) : (
              <ReleasePlate rows={rows} mayRelease={mayRelease} now={now} />
            )}
            {rows.length > 0 && (
              <div className="plate-body border-t-[1.5px] border-rule">
                <Caution about="metal" />
              </div>
            )}
          </section>

          {groups.driedOut.length > 0 && (
            <GroupPlate
              title="Dried out, look over"
              line="what stands between each and its release"
              heads={['Dry since', 'Missing', 'Pour', '']}
            >
              {groups.driedOut.map((tree) => (
                <GroupRow key={tree.id} tree={tree}>
                  <Cell label="Dry since">{tree.stateSince === null ? '' : formatMoment(tree.stateSince, now, timeZone)}</Cell>
                  <Cell label="Missing">{missingWords(blockingChecks(checks[tree.id] ?? []).map((check) => check.text))}</Cell>
                  <Cell label="Pour">
                    <PourWords pourDate={tree.pourDate} verdict={pourVerdict(tree, context)} />
                  </Cell>
                  <Cell label="">
                    <KeyLink href={`/trees/${encodeURIComponent(tree.tag)}#look-over`}>
                      {may(member.role, 'look over') ? 'Look over' : 'See it'}
                    </KeyLink>
                  </Cell>
                </GroupRow>
              ))}
            </GroupPlate>
          )}

          {groups.lastCoatOn.length > 0 && (
            <GroupPlate title="Last coat on" line="drying out, against the pour" heads={['Dried out', 'Pour']}>
              {groups.lastCoatOn.map((tree) => (
                <GroupRow key={tree.id} tree={tree}>
                  <Cell label="Dried out">
                    <DriedOut tree={tree} pair={tree.dry} context={context} />
                  </Cell>
                  <Cell label="Pour">
                    <PourWords pourDate={tree.pourDate} verdict={pourVerdict(tree, context)} />
                  </Cell>
                </GroupRow>
              ))}
            </GroupPlate>
          )}

          {groups.stillDipped.length > 0 && (
            <GroupPlate
              title="Still being dipped"
              line="with a pour date; played forward coat by coat"
              heads={['Now', 'Dried out', 'Pour']}
            >
              {groups.stillDipped.map((tree) => (
                <GroupRow key={tree.id} tree={tree}>
                  <Cell label="">
                    <StateMark state={tree.state} since={tree.stateSince} now={now} />
                  </Cell>
                  <Cell label="Dried out">
                    <DriedOut tree={tree} pair={tree.driedOut} context={context} />
                  </Cell>
                  <Cell label="Pour">
                    <PourWords pourDate={tree.pourDate} verdict={pourVerdict(tree, context)} />
                  </Cell>
                </GroupRow>
              ))}
            </GroupPlate>
          )}
        </div>

        <div className="tree-column">
          <section className="plate">
            <header>
              <h2>Held</h2>
              <p>{groups.held.length === 0 ? 'none' : 'nothing goes on, and nothing goes in, until it is lifted'}</p>
            </header>
            {groups.held.length > 0 && (
              <ul className="notes">
                {groups.held.map((tree) => (
                  <li key={tree.id} id={tree.tag} className="link-row">
                    <Tag tag={tree.tag} height={fittedTagHeight(tree.tag, 32)} isHeld />
                    <div className="min-w-0">
                      <b>
                        <Link className="row-link" href={`/trees/${encodeURIComponent(tree.tag)}`} prefetch={false}>
                          {tree.title}
                        </Link>{' '}
                        {tree.isDemo && <DemoMark />}
                      </b>
                      <span className="block text-furnace-ink">{tree.hold?.reason}</span>
                      <span className="block">
                        {tree.hold !== null && `${tree.hold.by}, ${formatMoment(tree.hold.at, now, timeZone)}. `}
                        {coatsOnWords(tree)}.
                      </span>
                      {tree.pourDate !== null && (
                        <span className="block">
                          Pour <PourWords pourDate={tree.pourDate} verdict={pourVerdict(tree, context)} />
                        </span>
                      )}
                    </div>
                  </li>
                ))}
              </ul>
            )}
          </section>
          <section className="plate">
            <header>
              <h2>Released</h2>
              <p>{released.length === 0 ? 'none within seven days' : 'within seven days'}</p>
            </header>
            {released.length > 0 && (
              <ul className="notes">
                {released.slice(0, MOST_RELEASED).map((tree) => (
                  <li key={tree.id} className="link-row">
                    <Tag tag={tree.tag} height={fittedTagHeight(tree.tag, 32)} />
                    <div className="min-w-0 grow">
                      <b>
                        <Link className="row-link" href={`/trees/${encodeURIComponent(tree.tag)}`} prefetch={false}>
                          {tree.title}
                        </Link>{' '}
                        {tree.isDemo && <DemoMark />}
                      </b>
                      <span className="block">
                        {tree.stateSince === null ? '' : `Released ${formatMoment(tree.stateSince, now, timeZone)}.`}
                      </span>
                      {mayRelease && (
                        <details className="fold-inside">
                          <summary>Take it back</summary>
                          <ReasonForm
                            action={withdrawReleaseAction.bind(null, tree.id)}
                            label={`Why ${tree.tag} comes back`}
                            hint="Only while it has not been in the kiln."
                            confirm="Take the release back"
                          />
                        </details>
                      )}
                    </div>
                  </li>
                ))}
                {released.length > MOST_RELEASED && (
                  <li>
                    <Link href="/trees?state=gone">More among the trees</Link>
                  </li>
                )}
              </ul>
            )}
          </section>
        </div>
      </div>
    </>
  )
}

function missingWords(missing: string[]): string {
  return missing.length === 0 ? 'A look-over.' : missing.join(' ')
}

function StandsMark({ code }: { code: InTheWay['code'] }) {
  switch (code) {
    case 'will miss':
      return (
        <span className="text-furnace-ink">
          <MissMark />
        </span>
      )
    case 'tight':
    case 'confirm':
      return <Icon name="warning" className="text-ochre-ink" />
    case 'held':
      return <Icon name="hold" className="text-furnace-ink" />
    case 'look over':
    case 'drying out':
      return null
  }
}

function DriedOut({
  tree,
  pair,
  context,
}: {
  tree: QueueTree
  pair: { likelyAt: number | null; safeAt: number | null } | null
  context: PourContext
}) {
  if (pair === null || pair.likelyAt === null) {
    return (
      <span className="text-soot">
        not in sight: {tree.state === 'unknown' ? 'no reading of the air' : 'further off than the forecast'}
      </span>
    )
  }
  return (
    <>
      <TimePair pair={pair} now={context.now} timeZone={context.timeZone} guard="safe" />
      {tree.isPlanUncalibrated && <span className="block text-14 text-soot">{NOT_CALIBRATED}</span>}
    </>
  )
}

function GroupPlate({ title, line, heads, children }: { title: string; line: string; heads: string[]; children: ReactNode }) {
  return (
    <section className="plate">
      <header>
        <h2>{title}</h2>
        <p>{line}</p>
      </header>
      <div className="scroll-x">
        <table className="table burnout-table" role="table">
          <thead role="rowgroup">
            <tr role="row">
              {['Tree', 'Piece', 'Shell', ...heads].map((head) => (
                <th key={head} role="columnheader" scope="col">
                  {head === '' ? <span className="vh">Keys</span> : head}
                </th>
              ))}
            </tr>
          </thead>
          <tbody role="rowgroup">{children}</tbody>
        </table>
      </div>
    </section>
  )
}

/** A cell that on a phone, without the table's head, says itself what it is. */
function Cell({ label, children }: { label: string; children: ReactNode }) {
  return (
    <td role="cell">
      {label !== '' && (
        <span className="cell-label" aria-hidden="true">
          {label}:{' '}
        </span>
      )}
      {children}
    </td>
  )
}

function GroupRow({ tree, children }: { tree: QueueTree; children: ReactNode }) {
  return (
    <tr id={tree.tag} role="row" className="link-row">
      <td role="cell" className="c-tag">
        <Tag tag={tree.tag} height={fittedTagHeight(tree.tag, 32)} />
      </td>
      <th role="rowheader" scope="row" className="c-piece">
        <Link className="row-link" href={`/trees/${encodeURIComponent(tree.tag)}`} prefetch={false}>
          {tree.title}
        </Link>{' '}
        {tree.isDemo && <DemoMark />}
      </th>
      <td role="cell" className="c-shell">
        <TreeSection tree={tree} height={20} fit={110} isDecoration />
        <span className="block whitespace-nowrap text-14 text-soot">{coatsOnWords(tree)}</span>
      </td>
      {children}
    </tr>
  )
}

import type { Metadata } from 'next'
import Link from 'next/link'
import { notFound } from 'next/navigation'
import { DemoMark } from '@/app/_components/demo-mark'
import { Icon } from '@/app/_components/icons'
import { LiveClock } from '@/app/_components/live-clock'
import { Plate } from '@/app/_components/plate'
import { StateGlyph } from '@/app/_components/state-mark'
import { Tag } from '@/app/_components/tag'
import { TellMeKey } from '@/app/_components/tell-me-key'
import { TimePair } from '@/app/_components/time-pair'
import { NOT_CALIBRATED } from '@/app/(office)/_components/due-words'
import { KeepFresh } from '@/app/(office)/_components/keep-fresh'
import { TreeSection } from '@/app/(office)/_components/tree-section'
import { WarningList } from '@/app/(office)/_components/warning-list'
import { withdrawReleaseAction } from '@/app/(office)/burnout/actions'
import { About, RecipeLink } from '@/app/(office)/trees/[tag]/_components/about'
import { BigSection } from '@/app/(office)/trees/[tag]/_components/big-section'
import { CoatLog } from '@/app/(office)/trees/[tag]/_components/coat-log'
import { DryingCharts } from '@/app/(office)/trees/[tag]/_components/drying-charts'
import { History } from '@/app/(office)/trees/[tag]/_components/history'
import { Holds } from '@/app/(office)/trees/[tag]/_components/holds'
import { IntakeForm } from '@/app/(office)/trees/[tag]/_components/intake-form'
import { IntakeLines } from '@/app/(office)/trees/[tag]/_components/intake-lines'
import { EvidenceKeys } from '@/app/(office)/trees/[tag]/_components/evidence-keys'
import { LookOvers } from '@/app/(office)/trees/[tag]/_components/look-overs'
import { Outlook } from '@/app/(office)/trees/[tag]/_components/outlook'
import { PhonePair } from '@/app/(office)/trees/[tag]/_components/phone-pair'
import { ReasonForm } from '@/app/(office)/_components/reason-form'
import { TakeBack } from '@/app/(office)/trees/[tag]/_components/take-back'
import { TreeActs } from '@/app/(office)/trees/[tag]/_components/tree-acts'
import { pourVerdict } from '@/lib/burnout/pour-verdict'
import { systemClock } from '@/lib/core/clock'
import { stateTone } from '@/lib/format/state-words'
import { WhyPlate } from '@/app/(office)/trees/[tag]/_components/why-plate'
import '@/app/(office)/trees/[tag]/evidence.css'
import { formatDate, formatDay, formatMoment } from '@/lib/format/local-time'
import { typedWords } from '@/lib/format/typed-units'
import { formatSeconds, formatShare } from '@/lib/format/units'
import { may } from '@/lib/members/roles'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { loadNewerVersions } from '@/lib/queries/newer-versions'
import { loadTreeDetail } from '@/lib/queries/tree-detail'
import { loadTreeForm } from '@/lib/queries/tree-form'
import { requireMemberPage } from '@/lib/server/auth'
import { readTag } from '@/lib/trees/read-tag'
import { nextDipWords, treeVerdict } from '@/lib/trees/tree-verdict'
import { saidWords } from '@/lib/trees/word'

/** Said elsewhere on this page: in the verdict, the pour's line, the hold and the intake. */
const SAID_ELSEWHERE = new Set(['still wet', 'held', 'pour at risk', 'intake open'])

export async function generateMetadata({ params }: PageProps<'/trees/[tag]'>): Promise<Metadata> {
  return { title: readTag((await params).tag) ?? 'Tree' }
}

export default async function TreePage({ params }: PageProps<'/trees/[tag]'>) {
  const tag = readTag((await params).tag)
  if (tag === null) notFound()
  const member = await requireMemberPage('see', `/trees/${encodeURIComponent(tag)}`)
  const now = systemClock.now()
  const [detail, { timeZone, calendar }, { places }] = await Promise.all([
    loadTreeDetail({ tag, viewer: { id: member.id, role: member.role }, clock: systemClock }),
    loadFoundry(),
    loadTreeForm(),
  ])
  if (detail === null) notFound()
  const newerVersions = may(member.role, 'recipes') ? await loadNewerVersions(detail.tree.id) : []

  const { tree, recipe, coats, curve, intake, holds, lookOvers, release } = detail
  const moment = { now, timeZone }
  const verdict = treeVerdict(tree, now)
  const pour = pourVerdict(tree, { now, timeZone, calendar })
  const hasLeft = tree.state === 'released' || tree.state === 'scrapped'
  const isDryNow = tree.dry?.safeAt != null && tree.dry.safeAt <= now
  const isCoatOpen = tree.newestCoat !== null && !hasLeft && tree.state !== 'ready for burnout'
  const openHold = holds.find((hold) => hold.liftedAt === null) ?? null
  const canDo = (act: Parameters<typeof may>[1]) => may(member.role, act)
  const mayNote = (isCoatOpen || (tree.newestCoat === null && !hasLeft)) && canDo('evidence')
  const mayWatch =
    canDo('subscribe') && (['wet', 'drying', 'nearly dry', 'unknown', 'last coat on'].includes(tree.state) || detail.isWatched) && !hasLeft
  // Without a reading nobody can tell: then no figure of the clock is shown as if it held.
  const isUnknown = tree.state === 'unknown'
  const newestRow = coats.find((coat) => coat.isNewest)
  const targetPct = Math.round((1 - tree.openTarget) * 100)
  const isLookedOver = lookOvers.some((look) => look.coatNumber === tree.newestCoat?.number)
  const isReleasable = tree.state === 'ready for burnout' || (tree.state === 'dried out' && isLookedOver)
  const said = tree.word === null ? null : `${saidWords(tree.word)}, ${formatMoment(tree.word.at, now, timeZone)}.`
  const isCoatDrying = tree.moistureRatio !== null && ['wet', 'drying', 'nearly dry', 'last coat on'].includes(tree.state)
  const isDue = ['dip now', 'waiting', 'overdue', 'wax ready'].includes(tree.state)

  const stateWords = (
    <b className={`state state-${stateTone(tree.state)}`}>
      <StateGlyph state={tree.state} />
      <span>{verdict.headline}</span>
    </b>
  )
  const pairLine =
    verdict.pairLead !== null && tree.dry !== null ? (
      <>
        {verdict.pairLead}{' '}
        <TimePair pair={tree.dry} now={now} timeZone={timeZone} guard={tree.state === 'last coat on' ? 'safe' : tree.guard} />
        {isDryNow ? ', by the clock' : ''}
        {tree.isUncalibrated && <span className="text-soot"> ({NOT_CALIBRATED})</span>}.{' '}
      </>
    ) : null
  const takeBack = detail.takeBack !== null && newestRow !== undefined && (
    <TakeBack key={detail.takeBack.coatId} takeBack={detail.takeBack} coatNumber={newestRow.number} now={now} />
  )

  return (
    <article className="tree-page">
      <KeepFresh />
      <div className="phone-head">
        <Link href="/trees" aria-label="Back to the trees">
          <Icon name="back" />
        </Link>
        <Tag tag={tag} size="l" isHeld={tree.state === 'held'} ground="bone" />
        <LiveClock className="ml-auto text-18" serverNow={now} timeZone={timeZone} />
      </div>
      <div className="phone-section">
        <TreeSection tree={tree} height={80} width={358} />
      </div>
      <header className="tree-head">
        <span className="tree-head-tag">
          <Tag tag={tag} size="xl" isHeld={tree.state === 'held'} ground="bone" />
        </span>
        <div className="min-w-0 grow">
          <h1>
            {tree.title} {tree.isDemo && <DemoMark />}
          </h1>
          <p className="tree-facts">
            Recipe <RecipeLink recipe={recipe}>{recipe.name}</RecipeLink> ·{' '}
            {[
              `treed ${formatDate(detail.createdAt, timeZone)}${detail.createdBy === null ? '' : ` by ${detail.createdBy}`}`,
              `${typedWords(detail.waxMassKg, member.units.mass)} wax`,
              tree.place.name,
              tree.pourDate === null ? 'no pour date' : `pour ${formatDay(tree.pourDate)}`,
            ].join(' · ')}
          </p>
        </div>
        <TreeActs
          treeId={tree.id}
          tag={tag}
          isHeld={openHold !== null}
          may={{
            hold: canDo('hold') && !hasLeft,
            lift: canDo('lift hold'),
            move: canDo('move') && !hasLeft,
            correct: canDo('correct'),
            edit: canDo('trees') && !hasLeft,
            scrap: canDo('trees') && !hasLeft,
            release: canDo('release') && isReleasable && openHold === null,
            dip: canDo('dip') && !hasLeft,
          }}
          nextDip={tree.next === null ? null : { number: tree.next.number, isDue }}
          places={places}
          placeId={tree.place.id}
          newerVersions={newerVersions}
          coatsOn={tree.coatsOn}
        />
      </header>

      <section className="plate verdict" aria-label="How it stands">
        <div className="verdict-say">
          <p className="verdict-line">
            {stateWords}
            {isCoatDrying && <span className="only-phone">{formatShare(tree.moistureRatio)} of its water left</span>}
            <span className="verdict-words">
              {pairLine}
              {verdict.next}
            </span>
          </p>
          {mayWatch && (
            <div className="verdict-watch">
              <TellMeKey treeId={tree.id} isWatched={detail.isWatched} />
            </div>
          )}
          {mayNote && (
            <div className="verdict-look">
              <EvidenceKeys key={`${tree.newestCoat?.id} ${tree.spots.join()}`} tree={tree} said={said} {...moment} />
            </div>
          )}
        </div>
        {openHold !== null && (
          <p className="held-line">
            <b>{openHold.reason}</b> Held by {openHold.by}, {formatMoment(openHold.at, now, timeZone)}.
          </p>
        )}
        {/* The one large pair of a phone; the sentence above says it on a desk. */}
        {verdict.pairLead !== null && tree.dry !== null && (
          <PhonePair
            lead={verdict.pairLead}
            pair={tree.dry}
            note={tree.isUncalibrated ? NOT_CALIBRATED : null}
            now={now}
            timeZone={timeZone}
          />
        )}
        {tree.next !== null && !hasLeft && (
          <div className="phone-next">
            <p className="label">{isDue ? 'Now' : 'Then'}</p>
            <p className="phone-next-dip">{nextDipWords(tree.next)}</p>
            <p>
              Drain {formatSeconds(tree.next.drainSeconds)}. Back to {tree.place.name}.
            </p>
          </div>
        )}
        <WarningList warnings={tree.warnings.filter((warning) => !SAID_ELSEWHERE.has(warning.code))} />
        <BigSection detail={detail} {...moment} />
        <div className="verdict-foot">
          <Outlook tree={tree} pour={pour} {...moment} />
          {takeBack}
        </div>
      </section>

      {!hasLeft && intake.passedAt === null && (
        <Plate title="Intake" line="before coat 1, passed as a whole" className="mt-5">
          {canDo('intake') ? <IntakeForm treeId={tree.id} intake={intake} /> : <IntakeLines intake={intake} />}
        </Plate>
      )}

      {release !== null && (
        <Plate title="Released" className="mt-5">
          <p>
            Released by {release.by}, {formatMoment(release.at, now, timeZone)}
            {release.confirmedBy === null ? '' : `, confirmed dry by ${release.confirmedBy}`}.
          </p>
          {canDo('release') && tree.state === 'released' && (
            <details className="fold-inside">
              <summary>Take the release back</summary>
              <ReasonForm action={withdrawReleaseAction.bind(null, tree.id)} label="Why it comes back" confirm="Take it back" />
            </details>
          )}
        </Plate>
      )}

      <section className="plate mt-5">
        <header>
          <h2>Coat log</h2>
          <p>
            newest first
            {newestRow !== undefined &&
              !hasLeft &&
              (tree.next === null
                ? `; the last coat is dried out at ${targetPct} % of its water`
                : `; coat ${newestRow.number} may be dipped over at ${targetPct} % of its water or less`)}
          </p>
        </header>
        {coats.length === 0 ? (
          <p className="px-4 py-3 text-soot">The recipe has no coat.</p>
        ) : (
          <CoatLog coats={coats} isUnknown={isUnknown} tempUnit={member.units.temp} {...moment} />
        )}
      </section>

      <div className="tree-columns">
        <div className="tree-column">
          {newestRow !== undefined && !hasLeft && (
            <Plate
              title={`Drying of coat ${newestRow.number}`}
              line={!tree.isUncalibrated ? 'water left in the coat, %' : `water left in the coat, %; ${NOT_CALIBRATED}`}
            >
              {curve === null || curve.points.length === 0 ? (
                <p className="text-soot">No curve: no reading of the air reaches this coat.</p>
              ) : (
                <DryingCharts
                  curve={isUnknown ? { ...curve, likelyAt: null, safeAt: null } : curve}
                  climate={detail.climate}
                  coatNumber={newestRow.number}
                  isLastCoat={tree.next === null}
                  moistureRatio={isUnknown ? null : tree.moistureRatio}
                  now={now}
                  timeZone={timeZone}
                />
              )}
            </Plate>
          )}
          {detail.why !== null && newestRow?.on && !hasLeft && (
            <WhyPlate
              why={detail.why}
              evidence={newestRow.on.evidence}
              viewer={member}
              isUncalibrated={tree.isUncalibrated}
              units={member.units}
              {...moment}
            />
          )}
          <Plate title="About the tree">
            <About detail={detail} massUnit={member.units.mass} timeZone={timeZone} now={now} />
          </Plate>
        </div>
        <div className="tree-column">
          <LookOvers detail={detail} mayLookOver={canDo('look over')} {...moment} />
          <Holds treeId={tree.id} holds={holds} mayLift={canDo('lift hold')} {...moment} />
          <section className="plate">
            <header>
              <h2>History</h2>
            </header>
            <History history={detail.history} {...moment} />
          </section>
        </div>
      </div>
    </article>
  )
}

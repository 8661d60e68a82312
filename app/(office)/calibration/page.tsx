import type { Metadata } from 'next'
import Link from 'next/link'
import { KeyLink } from '@/app/_components/key'
import { EmptyState } from '@/app/(office)/_components/empty-state'
import { FoundryNav } from '@/app/(office)/_components/foundry-nav'
import { AcceptedRows } from '@/app/(office)/calibration/_components/accepted-rows'
import { CheckTable } from '@/app/(office)/calibration/_components/check-table'
import { FactorRows } from '@/app/(office)/calibration/_components/factor-rows'
import { OutcomeCharts } from '@/app/(office)/calibration/_components/outcome-charts'
import { RecipePlate } from '@/app/(office)/calibration/_components/recipe-plate'
import { clockSentence } from '@/lib/calibration/calibration-words'
import { errorMinutes, isInside } from '@/lib/calibration/forecast-check'
import { systemClock } from '@/lib/core/clock'
import { loadCalibration, type CalibrationPage as Calibration } from '@/lib/queries/calibration'
import { OUTCOME_DAYS } from '@/lib/queries/load-outcomes'
import { requireMemberPage } from '@/lib/server/auth'
import './calibration.css'

export const metadata: Metadata = { title: 'Calibration' }

/** How good the drying clock is, and what finished coats say of its figures. */
export default async function CalibrationPage() {
  const member = await requireMemberPage('calibrate', '/calibration')
  const page = await loadCalibration(systemClock.now())
  return (
    <>
      <FoundryNav role={member.role} />
      <div className="page-head">
        <div className="min-w-0 grow">
          <h1>Calibration</h1>
          <p>{clockSentence(page.clock)}</p>
        </div>
      </div>
      {page.outcomeCount === 0 && page.accepted.length === 0 ? (
        <EmptyState
          title="No finished coat tells anything yet"
          action={
            <KeyLink href="/floor" tone="go">
              To the floor
            </KeyLink>
          }
        >
          Weigh or feel coats while they dry, at each tree on the floor. Once such a coat is dipped over, this page shows how well its times
          held; after five coats of one number it proposes what a recipe’s coat, a place’s air or a recess needs here. Nothing changes until
          a supervisor takes it over.
        </EmptyState>
      ) : (
        <Filled page={page} />
      )}
    </>
  )
}

function Filled({ page }: { page: Calibration }) {
  const told = page.recipes.filter(({ coats }) => coats.some(({ learned }) => learned.count > 0))
  return (
    <div className="calibration">
      <p className="text-soot">
        {page.countedCount} of {page.outcomeCount} coats with evidence count
        {page.isCut ? ', the newest of the last two years' : `, of the last ${Math.round(OUTCOME_DAYS / 365)} years`}. Nothing here changes
        by itself: a person takes it over, and can go back.
      </p>
      {told.length === 0 && <p>No coat of a recipe in use counts yet. Below stands why each was left out.</p>}
      {told.map((recipe) => (
        <RecipePlate key={recipe.id} recipe={recipe} />
      ))}
      {(page.places.length > 0 || page.recesses.length > 0) && (
        <div className="calibration-pair">
          {page.places.length > 0 && (
            <section className="plate">
              <header>
                <h2>Air of the places</h2>
                <p>how much faster each dries than its air speed says</p>
              </header>
              <FactorRows
                rows={page.places.map(({ name, ...proposal }) => ({
                  name,
                  proposal,
                  input: { scope: 'place', placeId: proposal.subject, factor: proposal.factorAfter },
                  nothingToCompare:
                    'No proposal: no coat of a number hung here and elsewhere with five coats behind it, so nobody can tell the air from the recipe.',
                }))}
              />
            </section>
          )}
          {page.recesses.length > 0 && (
            <section className="plate">
              <header>
                <h2>Recesses</h2>
                <p>how much slower they dry than an outside</p>
              </header>
              <FactorRows
                rows={page.recesses.map((proposal) => ({
                  name: `Trees with a ${proposal.subject}`,
                  proposal,
                  input: { scope: 'recess', recessClass: proposal.subject, factor: proposal.factorAfter },
                  nothingToCompare: 'No proposal: no coat of the same number has five coats of trees without a recess behind it.',
                }))}
              />
            </section>
          )}
        </div>
      )}
      {page.accepted.length > 0 && (
        <section className="plate">
          <header>
            <h2>Taken over</h2>
            <p>newest first; going back makes a further version, or holds from now on</p>
          </header>
          <AcceptedRows rows={page.accepted} timeZone={page.timeZone} />
        </section>
      )}
      {page.checked.length > 0 && (
        <section className="plate">
          <header>
            <h2>Forecast and outcome</h2>
            <p>
              {page.checked.length === 1
                ? '1 coat that was dry before it was covered'
                : `${page.checked.length} coats that were dry before they were covered`}
              {page.earlyCount > 0 && `; ${page.earlyCount} more were dipped over before, and tell nothing of times`}
            </p>
          </header>
          <div className="plate-body">
            <OutcomeCharts
              timeZone={page.timeZone}
              points={page.checked.map((coat) => ({
                id: coat.outcome.coatId,
                tag: coat.outcome.tag,
                number: coat.outcome.number,
                coveredAt: coat.outcome.coveredAt,
                earliestHours: coat.earliestHours,
                likelyHours: coat.likelyHours,
                safeHours: coat.safeHours,
                dryHours: coat.dryHours,
                errorMinutes: errorMinutes(coat),
                isInside: isInside(coat),
              }))}
            />
          </div>
        </section>
      )}
      {page.checked.length > 0 && (
        <div className="calibration-pair">
          <section className="plate">
            <header>
              <h2>By place</h2>
              <p>where the coats hung at their dip</p>
            </header>
            <CheckTable head="Place" rows={page.byPlace} />
          </section>
          <section className="plate">
            <header>
              <h2>By who dipped</h2>
            </header>
            <CheckTable head="Dipped by" rows={page.byPerson} />
            <p className="plate-body text-soot">
              Whoever drains short or sands thick has coats that dry later than told, day after day. A difference smaller than the middle
              half means nothing, and neither does one of few coats.
            </p>
          </section>
        </div>
      )}
      {page.leftOut.length > 0 && <LeftOutPlate page={page} />}
    </div>
  )
}

function LeftOutPlate({ page }: { page: Calibration }) {
  return (
    <section className="plate">
      <header>
        <h2>Left out</h2>
        <p>covered coats from which nothing is learned, and why</p>
      </header>
      <ul className="left-out-rows">
        {page.leftOut.map(({ reason, text, count, newest }) => (
          <li key={reason}>
            <p>
              <b className="num">{count}</b> {text}
            </p>
            <p className="text-soot">
              {count > newest.length ? 'The newest: ' : ''}
              {newest.map(({ tag, number }, index) => (
                <span key={`${tag} ${number}`}>
                  {index > 0 && ', '}
                  <Link className="underline underline-offset-4" href={`/trees/${encodeURIComponent(tag)}`} prefetch={false}>
                    {tag}
                  </Link>{' '}
                  coat {number}
                </span>
              ))}
            </p>
          </li>
        ))}
      </ul>
    </section>
  )
}

import { Icon } from '@/app/_components/icons'
import { Caution } from '@/app/(office)/_components/caution'
import type { Moment } from '@/app/(office)/_components/due-words'
import { LookOverForm } from '@/app/(office)/trees/[tag]/_components/look-over-form'
import { formatMoment } from '@/lib/format/local-time'
import type { TreeDetail } from '@/lib/trees/detail-contract'

/** What was seen on the shell, newest first, and the form for the next look. */
export function LookOvers({ detail, mayLookOver, now, timeZone }: { detail: TreeDetail; mayLookOver: boolean } & Moment) {
  const { tree, lookOvers } = detail
  const hasLeft = tree.state === 'released' || tree.state === 'scrapped'
  return (
    <section className="plate" id="look-over">
      <header>
        <h2>Look-overs</h2>
        <p>{lookOvers.length === 0 ? 'none yet' : lookOvers.length}</p>
      </header>
      {lookOvers.length > 0 && (
        <ul className="notes">
          {lookOvers
            .toSorted((left, right) => right.at - left.at)
            .map((look) => (
              <li key={look.id}>
                <Icon name="check" className="text-verdigris-ink" />
                <div>
                  <b>{look.note === '' ? 'Nothing to note' : look.note}</b>
                  <span>
                    Looked over at coat {look.coatNumber}. {look.by}, {formatMoment(look.at, now, timeZone)}.
                  </span>
                </div>
              </li>
            ))}
        </ul>
      )}
      {!hasLeft && tree.next !== null && (
        <p className="plate-body text-soot">Looked over when the last coat is on. A fault before that is a reason to hold.</p>
      )}
      {!hasLeft && tree.next === null && tree.newestCoat !== null && mayLookOver && (
        <div className="plate-body grid gap-3">
          <LookOverForm
            treeId={tree.id}
            isDue={tree.state === 'dried out'}
            warning={
              tree.state === 'dried out' || tree.state === 'ready for burnout' || tree.state === 'held'
                ? null
                : 'Not dried out yet by the clock: what is wet hides cracks. Look again when it is dry.'
            }
          />
          <Caution about="dust" />
        </div>
      )}
    </section>
  )
}

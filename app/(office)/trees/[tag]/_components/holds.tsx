import { Icon } from '@/app/_components/icons'
import type { Moment } from '@/app/(office)/_components/due-words'
import { ReasonForm } from '@/app/(office)/_components/reason-form'
import { liftHoldAction } from '@/app/(office)/trees/[tag]/actions'
import { formatMoment } from '@/lib/format/local-time'
import type { TreeDetail } from '@/lib/trees/detail-contract'

/** Why the tree was held, newest first, and the form that lifts the hold that stands. */
export function Holds({
  treeId,
  holds,
  mayLift,
  now,
  timeZone,
}: { treeId: string; holds: TreeDetail['holds']; mayLift: boolean } & Moment) {
  const openHold = holds.find((hold) => hold.liftedAt === null) ?? null
  return (
    <section className="plate">
      <header>
        <h2>Holds</h2>
        <p>{holds.length === 0 ? 'none' : openHold === null ? `${holds.length}, lifted` : 'held now'}</p>
      </header>
      {holds.length > 0 && (
        <ul className="notes">
          {holds
            .toSorted((left, right) => right.at - left.at)
            .map((hold) => (
              <li key={hold.id}>
                <Icon name="hold" className={hold.liftedAt === null ? 'text-furnace-ink' : 'text-soot'} />
                <div>
                  <b>{hold.reason}</b>
                  <span>
                    Held by {hold.by}, {formatMoment(hold.at, now, timeZone)}.
                    {hold.liftedAt !== null &&
                      ` Lifted by ${hold.liftedBy ?? 'somebody'}, ${formatMoment(hold.liftedAt, now, timeZone)}: ${hold.liftReason ?? ''}`}
                  </span>
                </div>
              </li>
            ))}
        </ul>
      )}
      {openHold !== null && (
        <div className="plate-body">
          {mayLift ? (
            <ReasonForm action={liftHoldAction.bind(null, treeId)} label="Why the hold is lifted" confirm="Lift the hold" />
          ) : (
            <p className="text-soot">A supervisor lifts holds.</p>
          )}
        </div>
      )}
    </section>
  )
}

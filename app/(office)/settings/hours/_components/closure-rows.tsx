'use client'

import { AddPlate } from '@/app/(office)/settings/_components/add-plate'
import { ActForm } from '@/app/(office)/settings/_components/act-form'
import { RowPlate } from '@/app/(office)/settings/_components/row-plate'
import { ClosureForm } from '@/app/(office)/settings/hours/_components/closure-form'
import { removeClosureAction } from '@/app/(office)/settings/hours/actions'
import { formatDay } from '@/lib/format/local-time'
import type { ClosureRow } from '@/lib/queries/closed-days'

const yearOf = (day: string) => day.slice(0, 4)

function daysWords({ firstDay, lastDay }: ClosureRow): string {
  if (firstDay === lastDay) return `${formatDay(firstDay)} ${yearOf(firstDay)}`
  const first = yearOf(firstDay) === yearOf(lastDay) ? formatDay(firstDay) : `${formatDay(firstDay)} ${yearOf(firstDay)}`
  return `${first} to ${formatDay(lastDay)} ${yearOf(lastDay)}`
}

/** The closed days: the next first, with their forms; those that are over folded. */
export function ClosureRows({ upcoming, past, mayChange }: { upcoming: ClosureRow[]; past: ClosureRow[]; mayChange: boolean }) {
  return (
    <>
      {mayChange && (
        <AddPlate
          words="Add closed days"
          empty={
            upcoming.length > 0
              ? null
              : {
                  title: 'No closed days ahead',
                  text: 'Holidays and days on which nobody dips stand here. No dip is foreseen on them, and every time that is promised takes them into account.',
                }
          }
          renderForm={(onDone) => <ClosureForm onDone={onDone} />}
        />
      )}
      {!mayChange && upcoming.length === 0 && <p>No closed days ahead.</p>}
      <ul className="settings-rows">
        {upcoming.map((closure) => (
          <RowPlate
            key={closure.id}
            title={closure.name}
            line={closure.isNow ? 'closed now' : undefined}
            {...(mayChange && {
              form: <ClosureForm closure={closure} />,
              keys: (
                <ActForm isHeldKey action={() => removeClosureAction(closure.id)} label={`Remove ${closure.name}`}>
                  Hold to remove
                </ActForm>
              ),
            })}
          >
            <p className="num text-18">{daysWords(closure)}</p>
          </RowPlate>
        ))}
      </ul>
      {past.length > 0 && (
        <details className="retired-fold">
          <summary>Past ({past.length})</summary>
          <ul className="past-closures">
            {past.map((closure) => (
              <li key={closure.id}>
                <b>{closure.name}</b>, {daysWords(closure)}
              </li>
            ))}
          </ul>
        </details>
      )}
    </>
  )
}

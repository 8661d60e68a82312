import { Icon } from '@/app/_components/icons'
import { formatMoment } from '@/lib/format/local-time'
import { personState } from '@/lib/members/person-state'

type Standing = { disabledAt: number | null; firstPasswordUntil: number | null }

/** How a member stands: mark, words, colour. */
export function PersonMark({ person, now, timeZone }: { person: Standing; now: number; timeZone: string }) {
  switch (personState(person, now)) {
    case 'active':
      return (
        <span className="state state-verdigris">
          <Icon name="check" />
          Active
        </span>
      )
    case 'disabled':
      return (
        <span className="state text-soot">
          <Icon name="cross" />
          Disabled {person.disabledAt === null ? '' : formatMoment(person.disabledAt, now, timeZone)}
        </span>
      )
    case 'first password open':
      return (
        <span className="state state-ochre">
          <Icon name="warning" />
          First password open until {person.firstPasswordUntil === null ? '' : formatMoment(person.firstPasswordUntil, now, timeZone)}
        </span>
      )
    case 'first password over':
      return (
        <span className="state state-furnace">
          <Icon name="warning" />
          First password has run out
        </span>
      )
  }
}

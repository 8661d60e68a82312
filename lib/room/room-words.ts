import { millisecondsInMinute } from 'date-fns/constants'
import { dipWords } from '@/lib/format/coat-words'
import { roughDuration } from '@/lib/format/duration'
import { formatMoment } from '@/lib/format/local-time'
import { timePairWords } from '@/lib/format/time-pair'
import type { QueueRoom } from '@/lib/queue/contract'
import { PULL_WORDS } from '@/lib/room/drying-pull'
import { soonerMs, type Move, type Tonight, type TreeEffect } from '@/lib/room/tonight'
import { nextOpenInstant, type Shift } from '@/lib/schedule/shifts'

/** Under this nothing is lost or won that anybody would notice. */
const LEAST_MS = 15 * millisecondsInMinute

export type Headline = { title: string; line: string }

type HeadlineInput = {
  rooms: readonly Pick<QueueRoom, 'pull' | 'speedPct' | 'isStale' | 'measuredAt' | 'sensorName'>[]
  effects: readonly TreeEffect[]
  tonight: Tonight
  now: number
  timeZone: string
}

/** The verdict at the head of the page: what the air takes from the trees, or gives them, until the next opening. */
export function roomHeadline({ rooms, effects, tonight, now, timeZone }: HeadlineInput): Headline {
  if (rooms.length === 0) return { title: 'Nobody reads the air yet', line: 'Without a reading no tree has a time at which it is dry.' }
  const speaking = rooms.filter((room) => !room.isStale && room.measuredAt !== null)
  if (speaking.length === 0) {
    const newest = Math.max(...rooms.map((room) => room.measuredAt ?? 0))
    return {
      title: 'The air is not known',
      line:
        newest === 0
          ? 'No reading has come yet: every coat stays unknown until one does.'
          : `No reading since ${formatMoment(newest, now, timeZone)}: every coat stays unknown until one comes.`,
    }
  }
  const silent = effects.filter((effect) => effect.tree.call.isUnknown).length
  const silentWords =
    silent === 0 ? '' : silent === 1 ? ' One tree has no reading of its air.' : ` ${silent} trees have no reading of their air.`
  if (effects.length === 0) return { title: 'Nothing is drying now', line: speaking.map(speedWords).join(', ') }
  const known = effects.filter((effect) => effect.lostMs !== null)
  if (known.length === 0) return { title: 'No tree has a time in sight', line: `${speaking.map(speedWords).join(', ')}.${silentWords}` }
  const lostMs = known.reduce((sum, effect) => sum + (effect.lostMs ?? 0), 0)
  const trees = known.length === 1 ? 'the tree' : 'the trees'
  const takes =
    tonight.name === 'Tonight'
      ? 'Tonight takes'
      : tonight.name.startsWith('Until')
        ? `${tonight.name} the air takes`
        : `${tonight.name} take`
  const gives =
    tonight.name === 'Tonight'
      ? 'Tonight gives'
      : tonight.name.startsWith('Until')
        ? `${tonight.name} the air gives`
        : `${tonight.name} give`
  const against = `against the recipe’s room, ${known.length === 1 ? 'one tree' : `${known.length} trees together`}.${silentWords}`
  if (lostMs >= LEAST_MS) return { title: `${takes} ${roughDuration(lostMs)} from ${trees}`, line: against }
  if (lostMs <= -LEAST_MS) return { title: `${gives} ${trees} ${roughDuration(lostMs)}`, line: against }
  return {
    title: 'The room dries at recipe speed',
    line: `${tonight.name === 'Tonight' ? 'Nothing is lost tonight' : 'Nothing is lost'} ${against}`,
  }
}

function speedWords(room: Pick<QueueRoom, 'pull' | 'speedPct' | 'sensorName'>): string {
  return `${room.sensorName}: ${PULL_WORDS[room.pull]}, ${Math.round(room.speedPct ?? 0)} % of recipe speed`
}

type AdviceInput = {
  effect: TreeEffect
  move: Move | null
  /** The place's air is read by a person. */
  isTypedOnly: boolean
  now: number
  timeZone: string
  shifts: readonly Shift[]
}

/** What to do with one tree, from what is known of it and nothing else. */
export function treeAdvice({ effect, move, isTypedOnly, now, timeZone, shifts }: AdviceInput): string {
  const { tree } = effect
  const { call, newest, facts } = tree
  if (facts.hold) return 'Held: lift the hold before the next act.'
  if (call.isUnknown) {
    return isTypedOnly ? 'Read the hygrometer, then confirm by touch.' : 'Check its sensor; until then confirm by touch.'
  }
  if (tree.warnings.some((warning) => warning.code === 'chill')) return `Take air off it: coat ${newest.number} chills the wax.`
  const slotOf = (at: number | null) => (at === null ? null : nextOpenInstant(at, shifts))
  const guardAt = tree.guard === 'safe' ? call.safeAt : call.likelyAt
  const slot = slotOf(guardAt)
  if (move) {
    const better = slotOf(tree.guard === 'safe' ? move.call.safeAt : move.call.likelyAt)
    const gainMs = soonerMs(slot, better)
    if (better !== null && (slot === null || (gainMs ?? 0) >= 2 * LEAST_MS)) {
      return `Hang it at ${move.place.name}, in more air: ${timePairWords(move.call, now, timeZone).text}.`
    }
  }
  if (guardAt === null && call.needsConfirmation) return 'Read the hygrometer again, or confirm by touch.'
  if (guardAt === null || slot === null) return 'Nothing yet: its time is not in sight.'
  const act = tree.isLastOn ? 'Look it over' : tree.next ? upperFirst(dipWords(tree.next.number, tree.next.kind)) : 'Dip it'
  const current = shifts[0]
  if (slot > guardAt) return `${act} at opening, ${formatMoment(slot, now, timeZone)}.`
  if (current && current.opensAt <= now && slot < current.closesAt) return `${act} in this shift.`
  const shift = shifts.find((candidate) => candidate.opensAt <= slot && candidate.closesAt > slot)
  return shift ? `${act} in the shift from ${formatMoment(shift.opensAt, now, timeZone)}.` : `${act} when it is dry.`
}

const upperFirst = (words: string) => words.charAt(0).toUpperCase() + words.slice(1)

import { formatReadAge } from '@/lib/format/duration'
import { formatMoment } from '@/lib/format/local-time'
import type { TempUnit } from '@/lib/format/units'
import type { Queue, QueueBath, QueueRoom, QueueTree, Warning } from '@/lib/queue/contract'
import { warningText } from '@/lib/queue/warning-text'

/** Age of the newest reading: 'read 2 min ago', 'no reading since 14:05', 'no reading yet'. */
export function readingAge(room: QueueRoom, now: number, timeZone: string): string {
  if (room.measuredAt === null) return 'no reading yet'
  return room.isStale ? `no reading since ${formatMoment(room.measuredAt, now, timeZone)}` : formatReadAge(room.measuredAt, now)
}

/**
 * The rooms with the one that most needs a look first: silent while trees dry in it, then too dry, then slow.
 * Among equals the one where most trees hang.
 */
export function roomsByWorry(queue: Pick<Queue, 'rooms' | 'places' | 'trees'>): QueueRoom[] {
  const trees = treesOf(queue)
  const worry = (room: QueueRoom) => {
    // Nobody waits for the air of an empty room.
    if (trees(room) === 0) return 5
    if (room.isStale || room.pull === 'not known') return 0
    return { 'too dry for face coats': 1, slow: 2, good: 3 }[room.pull]
  }
  return queue.rooms.toSorted((a, b) => worry(a) - worry(b) || trees(b) - trees(a) || a.sensorId - b.sensorId)
}

/**
 * The room that the strip shows: of those that speak the one where most trees hang. The silent ones beside it are counted,
 * so that a hygrometer nobody has read does not hide the air that is known.
 */
export function mainRoom(queue: Pick<Queue, 'rooms' | 'places' | 'trees'>): { room: QueueRoom | undefined; silentBeside: number } {
  const trees = treesOf(queue)
  const speaking = queue.rooms.filter((room) => !isSilent(room)).toSorted((a, b) => trees(b) - trees(a) || a.sensorId - b.sensorId)
  const room = speaking[0] ?? roomsByWorry(queue)[0]
  return { room, silentBeside: queue.rooms.filter((other) => other !== room && isSilent(other) && trees(other) > 0).length }
}

const isSilent = (room: QueueRoom) => room.isStale || room.measuredAt === null

/** How many trees hang in the air of a room's sensor. */
function treesOf(queue: Pick<Queue, 'places' | 'trees'>): (room: QueueRoom) => number {
  const sensorOf = new Map(queue.places.map((place) => [place.id, place.sensorId]))
  const hanging = new Map<number, number>()
  for (const tree of queue.trees) {
    const sensorId = sensorOf.get(tree.place.id)
    if (sensorId !== undefined) hanging.set(sensorId, (hanging.get(sensorId) ?? 0) + 1)
  }
  return (room) => hanging.get(room.sensorId) ?? 0
}

/** Baths that want stirring first, then the others, face before backup. */
export function bathsByNeed(baths: readonly QueueBath[]): QueueBath[] {
  return baths.toSorted(
    (a, b) =>
      Number(a.isStirredToday) - Number(b.isStirredToday) ||
      Number(b.kind === 'face') - Number(a.kind === 'face') ||
      a.name.localeCompare(b.name),
  )
}

/** 'Face slurry' as 'Face': under the heading of the baths the second word is known. */
export function shortBathName(name: string): string {
  return name.replace(/ slurry$/i, '')
}

/** What harms a shell while it hangs, gravest first: each has a remedy in the room, and none waits for the next dip. */
const CARE_CODES: readonly Warning['code'][] = ['chill', 'swing', 'heat', 'overdue']
const MOST_TAGS = 3

/** What harms some shells as they hang now: whose, and the sentence with its remedy of the first of them. */
export type CareLine = { code: Warning['code']; level: Warning['level']; tags: string; text: string }

/**
 * Chill, swing, heat and too long a wait, each once, with the tags it is true of; the gravest first. A coat that may be dipped over and has
 * waited too long stands in the column of the dips already.
 *
 * @example careLines(trees, 'degC')[0]?.tags // => 'T-118, T-120, T-122 and 2 more'
 */
export function careLines(trees: readonly Pick<QueueTree, 'tag' | 'state' | 'warnings'>[], unit: TempUnit): CareLine[] {
  const lines = CARE_CODES.flatMap((code): CareLine[] => {
    const told = trees.flatMap((tree) => {
      const warning = tree.state === 'overdue' ? undefined : tree.warnings.find((candidate) => candidate.code === code)
      return warning ? [{ tag: tree.tag, warning }] : []
    })
    const first = told.find(({ warning }) => warning.level === 'stop') ?? told[0]
    if (!first) return []
    const shown = told.slice(0, MOST_TAGS).map(({ tag }) => tag)
    const more = told.length - shown.length
    const tags = `${shown.join(', ')}${more > 0 ? ` and ${more} more` : ''}`
    return [{ code, level: first.warning.level, tags, text: warningText(first.warning, unit) }]
  })
  return lines.toSorted((a, b) => Number(b.level === 'stop') - Number(a.level === 'stop'))
}

import Link from 'next/link'
import { RANGE_NAMES, ROOM_RANGES, type RoomRange } from '@/lib/room/range'

/** The address of the page with one room and one range. */
export const roomHref = (sensorId: number, range: RoomRange): string =>
  `/room?sensor=${sensorId}${range === '48h' ? '' : `&range=${range}`}`

/** How much of the room's air is drawn: in the address, so that it can be kept and gone back to. */
export function RangeLinks({ sensorId, range }: { sensorId: number; range: RoomRange }) {
  return (
    <nav className="range-links" aria-label="How much is drawn">
      {ROOM_RANGES.map((other) => (
        <Link
          key={other}
          className="group-link"
          href={roomHref(sensorId, other)}
          prefetch={false}
          scroll={false}
          aria-current={other === range ? 'true' : undefined}
        >
          {RANGE_NAMES[other].replace(/^./, (first) => first.toUpperCase())}
        </Link>
      ))}
    </nav>
  )
}

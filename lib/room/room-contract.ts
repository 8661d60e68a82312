import type { QueueRoom, QueueTree } from '@/lib/queue/contract'
import type { PlaceFans } from '@/lib/room/fans-contract'
import type { Band, BandHours } from '@/lib/room/out-of-band'
import type { RoomRange } from '@/lib/room/range'
import type { Headline } from '@/lib/room/room-words'
import type { RoomPoint } from '@/lib/room/series'
import type { ShiftSpeed } from '@/lib/room/shift-speeds'
import type { Thing } from '@/lib/room/things-to-do'
import type { Pair } from '@/lib/room/tonight'

/** A line of the table: what the night does to one tree. */
export type EffectRow = {
  tree: QueueTree
  /** Negative where the air is faster than the recipe's room; null where nothing is known. */
  lostMs: number | null
  wonBackMs: number | null
  asItStands: Pair | null
  withDryer: Pair | null
  toDo: string
}

/** A coat in progress under the charts. */
export type CoatBar = { tag: string; coatNumber: number; dippedAt: number; likelyAt: number | null; safeAt: number | null }

/** A coat that was dipped over in this room's air, or came dry in it and waits. */
export type DriedCoat = {
  tag: string
  /** Of a demo tree, in a foundry that is not the demo itself. */
  isDemo: boolean
  coatNumber: number
  placeName: string
  dippedAt: number
  /** When it was dipped over; null while it waits. */
  coveredAt: number | null
  /** Share of its water left at the next dip; null where it was not known, or while it waits. */
  moistureRatio: number | null
  meanRelHumidityPct: number | null
}

/** The air at a place as the clock counts it now; `fans` is null where there is nothing to switch. */
export type PlaceNow = { id: string; name: string; treeCount: number; speed: string; fans: PlaceFans | null }
/** How long each room was outside its band and unread: today, since Monday, and over the drawn range where that is longer. */
export type BandTable = {
  monday: number
  hasRange: boolean
  rooms: { sensorId: number; sensorName: string; today: BandHours | null; week: BandHours | null; range: BandHours | null }[]
}

/** Everything the Room page shows. Temperatures degC, instants epoch milliseconds, speeds as shares of the reference speed. */
export type RoomPage = {
  now: number
  timeZone: string
  band: Band
  pressurePa: number
  headline: Headline
  /** The dryer that the table reckons with. */
  dryerPct: number | null
  wonBackMs: number
  /** Of every room, in order of name. */
  placesNow: PlaceNow[]
  rows: EffectRow[]
  things: Thing[]
  rooms: QueueRoom[]
  /** What their sensors told beside the air: % and Pa. */
  notes: { sensorId: number; batteryPct: number | null; pressurePa: number | null }[]
  /** The room whose charts are drawn; null where there is no sensor. */
  room: QueueRoom | null
  range: RoomRange
  points: RoomPoint[]
  from: number
  to: number
  closed: { from: number; to: number }[]
  /** When the doors close, null while they are closed; and when they open next. */
  closesAt: number | null
  opensAt: number
  bars: CoatBar[]
  shiftSpeeds: ShiftSpeed[]
  bandTable: BandTable
  dried: { since: number; coats: DriedCoat[]; isCut: boolean }
  /** Where the what-if begins: places of this room, and the lowest temperature at coat 1 of the trees that hang in it. */
  places: { id: string; name: string; airSpeedMps: number; hasFansToLeaveOn: boolean }[]
  coolestCoat1C: number | null
}

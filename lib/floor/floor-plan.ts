import type { DipNowSizes } from '@/lib/floor/fold-dip-now'

/** How the floor is laid out: one column to scroll, or a board without scrolling in one of three arrangements. */
export type FloorMode = 'list' | 'portrait' | 'compact' | 'wide'

/** Mode of a viewport, px. The same borders stand in floor.css. */
export function floorMode(width: number, height: number): FloorMode {
  if (width < 700 || height < 636) return 'list'
  if (width <= 900) return 'portrait'
  return width <= 1100 ? 'compact' : 'wide'
}

/** Heights shared with floor.css, px. */
const COLUMN_HEAD = 50
const TIDE_AXIS = 52
const TIDE_ROW_LEAST = 77
const TIDE_ROW_MOST = 104
const PAGE_KEY = 64
const BARE_WAX_LINE = 66
const HOOK = 64
/** Three rails with their headings, the gaps between them and the feet. */
export const RAILS = 127
const RACK_HEAD = 44
const HELD_HEAD = 40
const HELD_TREE = 104
const COMPACT_RACK = 126

export const DIP_NOW_SIZES: Record<Exclude<FloorMode, 'list'>, DipNowSizes> = {
  wide: { row: 84, denseRow: 77, rowGap: 10, head: 46, groupEdge: 13, runKey: 108, stirKey: 64, keyGap: 10, pageKey: 64, fold: 66 },
  compact: { row: 84, denseRow: 77, rowGap: 10, head: 42, groupEdge: 11, runKey: 100, stirKey: 64, keyGap: 10, pageKey: 64, fold: 66 },
  portrait: { row: 84, denseRow: 77, rowGap: 10, head: 44, groupEdge: 13, runKey: 100, stirKey: 64, keyGap: 10, pageKey: 64, fold: 66 },
}

/** Above an open sheet the run key is only as high as a row, and stirring waits. */
export const BESIDE_SHEET_RUN_KEY = 77

/** In portrait the dip column takes at most this share of the height, else the tide would lose its rows. */
const PORTRAIT_DIP_SHARE = 0.56
/** With a sheet open in portrait the dip column stands above it. */
const PORTRAIT_SHEET = 690

export type FloorPlan = {
  /** Height for groups and rows in the dip column. */
  dipList: number
  /** Height of the whole dip column in portrait; the deck's own elsewhere. */
  dipColumn: number
  /** Height for the rows of the tide. */
  tideRows: number
  /** Rows of hooks on the rack. */
  rackRows: number
}

/** Heights of the parts of the board. `dipNeed` is the height of its groups and rows. */
export function planFloor(
  mode: Exclude<FloorMode, 'list'>,
  deckHeight: number,
  needs: { dipNeed: number; hasBareWax: boolean; hasHeld: boolean; isSheetOpen: boolean },
): FloorPlan {
  const bare = needs.hasBareWax ? BARE_WAX_LINE : 0
  const held = needs.hasHeld ? HELD_HEAD + HELD_TREE : 0
  const railRows = (height: number) => Math.max(3, Math.floor((height - RACK_HEAD - RAILS - held) / HOOK))
  if (mode === 'portrait') {
    const most = needs.isSheetOpen ? deckHeight - PORTRAIT_SHEET : deckHeight * PORTRAIT_DIP_SHARE
    const edge = 6
    const dipColumn = Math.round(Math.max(240, Math.min(COLUMN_HEAD + needs.dipNeed + bare + edge, most)))
    const rest = deckHeight - dipColumn
    return {
      dipList: dipColumn - COLUMN_HEAD - bare - edge,
      dipColumn,
      tideRows: rest - COLUMN_HEAD - TIDE_AXIS - 5,
      rackRows: railRows(rest),
    }
  }
  const tide = mode === 'compact' ? deckHeight - COMPACT_RACK : deckHeight
  return {
    dipList: deckHeight - COLUMN_HEAD - bare,
    dipColumn: deckHeight,
    tideRows: tide - COLUMN_HEAD - TIDE_AXIS - 5,
    rackRows: mode === 'compact' ? 3 : railRows(deckHeight),
  }
}

/** How many rows the tide holds, and how high they stand. */
export function tideCapacity(height: number): { all: number; withPageKey: number } {
  return {
    all: Math.max(1, Math.floor(height / TIDE_ROW_LEAST)),
    withPageKey: Math.max(1, Math.floor((height - PAGE_KEY) / TIDE_ROW_LEAST)),
  }
}

/** Height of a row of the tide, px: what is there shared out, between the least a glove can hit and the most that helps. */
export function tideRowHeight(height: number, rows: number, hasPageKey: boolean): number {
  if (rows === 0) return TIDE_ROW_MOST
  return Math.floor(Math.min(TIDE_ROW_MOST, Math.max(TIDE_ROW_LEAST, (height - (hasPageKey ? PAGE_KEY : 0)) / rows)))
}

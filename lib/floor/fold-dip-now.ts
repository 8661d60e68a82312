/** Heights on the floor, px. The row is the touch target, so it never goes under 77. */
export type DipNowSizes = {
  row: number
  denseRow: number
  rowGap: number
  head: number
  /** Rule above a group and the room below it. */
  groupEdge: number
  runKey: number
  stirKey: number
  keyGap: number
  pageKey: number
  fold: number
}

export type GroupToFold = { key: string; count: number; isStirred: boolean }

export type DipNowSlot =
  | { kind: 'open'; groupKey: string; from: number; to: number; page: number; pages: number }
  | { kind: 'fold'; groupKey: string }
  /** Groups for which not even a folded line is left: one key leads to the list. */
  | { kind: 'more'; groupKeys: string[] }

export type DipNowPlan = { slots: DipNowSlot[]; isDense: boolean; height: number }

export type DipNowChoice = {
  /** The group that somebody has opened; the first one unless chosen. */
  openKey: string | null
  page: number
}

/**
 * Which groups stand open and which are folded, and how many whole rows show, so that nothing is cut and nothing needs a swipe.
 *
 * Everything open when it fits, first with full rows, then with dense ones. Else one group is open, the rest are folded to a line
 * with their count; groups after it open too while they fit whole. The open group turns pages when its rows do not fit.
 *
 * Shape: groups in floor order, the height at hand and the sizes in px; the slots come back top to bottom.
 */
export function foldDipNow(groups: readonly GroupToFold[], height: number, sizes: DipNowSizes, choice: DipNowChoice): DipNowPlan {
  if (groups.length === 0) return { slots: [], isDense: false, height: 0 }
  for (const isDense of [false, true]) {
    const row = isDense ? sizes.denseRow : sizes.row
    const total = groups.reduce((sum, group) => sum + openHeight(group, group.count, row, sizes, false), 0)
    if (total <= height) {
      const slots = groups.map((group): DipNowSlot => ({ kind: 'open', groupKey: group.key, from: 0, to: group.count, page: 0, pages: 1 }))
      return { slots, isDense, height: total }
    }
  }
  return foldSome(groups, height, sizes, choice)
}

function openHeight(group: GroupToFold, rows: number, row: number, sizes: DipNowSizes, hasPages: boolean): number {
  const list = rows * row + Math.max(0, rows - 1) * sizes.rowGap
  const keys = sizes.runKey + (group.isStirred ? 0 : sizes.keyGap + sizes.stirKey)
  return sizes.groupEdge + sizes.head + Math.max(list, keys) + (hasPages ? sizes.rowGap + sizes.pageKey : 0)
}

function foldSome(groups: readonly GroupToFold[], height: number, sizes: DipNowSizes, choice: DipNowChoice): DipNowPlan {
  const row = sizes.denseRow
  const open = groups.find((group) => group.key === choice.openKey) ?? groups[0]!
  const others = groups.filter((group) => group !== open)
  const leastOpen = openHeight(open, 1, row, sizes, open.count > 1)

  // As many folded lines as leave room for the open group; one more line is kept for 'more' when not all fit.
  const lines = Math.max(0, Math.floor((height - leastOpen) / sizes.fold))
  const shown = lines >= others.length ? others : others.slice(0, Math.max(0, lines - 1))
  const hidden = others.filter((group) => !shown.includes(group))
  let used = (shown.length + (hidden.length > 0 ? 1 : 0)) * sizes.fold

  let perPage = open.count
  if (openHeight(open, open.count, row, sizes, false) + used > height) {
    perPage = 1
    while (perPage + 1 < open.count && openHeight(open, perPage + 1, row, sizes, true) + used <= height) perPage += 1
  }
  const pages = Math.ceil(open.count / perPage)
  const page = Math.min(Math.max(0, choice.page), pages - 1)
  used += openHeight(open, Math.min(perPage, open.count), row, sizes, pages > 1)

  const alsoOpen = new Set<GroupToFold>()
  if (pages === 1) {
    for (const group of shown) {
      const more = openHeight(group, group.count, row, sizes, false) - sizes.fold
      if (used + more > height) break
      alsoOpen.add(group)
      used += more
    }
  }

  const slots = groups.flatMap((group): DipNowSlot[] => {
    if (group === open) {
      const from = page * perPage
      return [{ kind: 'open', groupKey: group.key, from, to: Math.min(group.count, from + perPage), page, pages }]
    }
    if (alsoOpen.has(group)) return [{ kind: 'open', groupKey: group.key, from: 0, to: group.count, page: 0, pages: 1 }]
    return shown.includes(group) ? [{ kind: 'fold', groupKey: group.key }] : []
  })
  if (hidden.length > 0) slots.push({ kind: 'more', groupKeys: hidden.map((group) => group.key) })
  return { slots, isDense: true, height: used }
}

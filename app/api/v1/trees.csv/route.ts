import { memberRoute } from '@/lib/server/api'
import { csvResponse } from '@/lib/server/csv'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { loadGoneBehind, loadTreeList, type GoneKey } from '@/lib/queries/tree-list'
import { localDay } from '@/lib/format/local-time'
import { treeColumns } from '@/lib/trees/tree-columns'
import { readTreeView, viewTrees, wordsOf } from '@/lib/trees/tree-view'

const ROWS_A_PART = 200

/** The list of trees as a file: what the address shows, all pages of it. */
export const GET = memberRoute('see', async ({ request, clock }) => {
  const view = readTreeView(Object.fromEntries(request.nextUrl.searchParams))
  const { timeZone, calendar } = await loadFoundry()
  const context = { now: clock.now(), timeZone, calendar }
  const columns = treeColumns(timeZone)
  const fileName = `trees-${localDay(context.now, timeZone)}.csv`
  if (view.group === 'gone') {
    let behind: GoneKey | null = null
    return csvResponse(fileName, columns, async (index) => {
      if (index > 0 && behind === null) return []
      const part = await loadGoneBehind({ words: wordsOf(view.query), behind, most: ROWS_A_PART }, { clock })
      behind = part.next
      return part.rows
    })
  }
  const trees = viewTrees(await loadTreeList({ clock }), view, context)
  return csvResponse(fileName, columns, async (index) => trees.slice(index * ROWS_A_PART, (index + 1) * ROWS_A_PART))
})

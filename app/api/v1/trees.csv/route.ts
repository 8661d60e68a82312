import { memberRoute } from '@/lib/server/api'
import { csvResponse } from '@/lib/server/csv'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { loadGoneTrees, loadTreeList } from '@/lib/queries/tree-list'
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
    return csvResponse(fileName, columns, async (index) => {
      const { rows } = await loadGoneTrees({ words: wordsOf(view.query), page: index + 1, size: ROWS_A_PART }, { clock })
      return rows
    })
  }
  const trees = viewTrees(await loadTreeList({ clock }), view, context)
  return csvResponse(fileName, columns, async (index) => trees.slice(index * ROWS_A_PART, (index + 1) * ROWS_A_PART))
})

import { TZDate } from '@date-fns/tz'
import type { TreeListRow } from '@/lib/trees/tree-list'

/** One column of the file of trees. */
export type TreeColumn = { head: string; value: (tree: TreeListRow) => string | number | null }

/**
 * The columns of the list of trees as a file. Instants are ISO 8601 with the foundry's own offset, so that both a person and a
 * program read them right.
 */
export function treeColumns(timeZone: string): TreeColumn[] {
  const instant = (at: number | null | undefined) => (at == null ? null : new TZDate(at, timeZone).toISOString())
  return [
    { head: 'tag', value: (tree) => tree.tag },
    { head: 'piece', value: (tree) => tree.title },
    { head: 'state', value: (tree) => tree.state },
    { head: 'state_since', value: (tree) => instant(tree.stateSince) },
    { head: 'coats_on', value: (tree) => tree.coatsOn },
    { head: 'coats_of_recipe', value: (tree) => tree.coats.length },
    { head: 'newest_coat_dipped', value: (tree) => instant(tree.newestCoat?.dippedAt) },
    { head: 'likely_dry', value: (tree) => instant(tree.dry?.likelyAt) },
    { head: 'safely_dry', value: (tree) => instant(tree.dry?.safeAt) },
    { head: 'shell_likely_dried_out', value: (tree) => instant(tree.driedOut?.likelyAt) },
    { head: 'shell_safely_dried_out', value: (tree) => instant(tree.driedOut?.safeAt) },
    { head: 'times_calibrated', value: (tree) => (tree.isUncalibrated ? 'no' : 'yes') },
    { head: 'place', value: (tree) => tree.place.name },
    { head: 'recipe', value: (tree) => tree.recipeLabel },
    { head: 'pour_date', value: (tree) => tree.pourDate },
    { head: 'held_because', value: (tree) => tree.hold?.reason ?? null },
  ]
}

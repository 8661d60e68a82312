import type { SetUpStock } from '@/lib/floor/set-up'
import { firstRunStock } from '@/lib/queries/first-run'
import { Member, Recipe } from '@/models'

/** What the shell room has of what it needs before its first tree. */
export async function loadSetUp(): Promise<SetUpStock> {
  const [stock, recipes, people] = await Promise.all([
    firstRunStock(),
    Recipe.count({ where: { retiredAt: null, isDemo: false } }),
    Member.count({ where: { disabledAt: null, isDemo: false } }),
  ])
  return { ...stock, recipes, people }
}

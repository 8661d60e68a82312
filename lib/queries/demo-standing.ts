import type { DemoStanding } from '@/lib/foundry/demo-standing'
import { Foundry, Member, Tree } from '@/models'

/** How this foundry stands to the demo data. */
export async function loadDemoStanding(): Promise<DemoStanding> {
  const [foundry, demoPeople, tree] = await Promise.all([
    Foundry.findByPk(1),
    Member.count({ where: { isDemo: true } }),
    Tree.findOne({ attributes: ['id'] }),
  ])
  if (foundry?.isDemo) return 'all demo'
  if (demoPeople > 0) return 'laid over'
  return tree ? 'has trees' : 'none'
}

import type { DemoSignIn } from '@/lib/demo/people'
import { loadDemoSignIns } from '@/lib/queries/demo-sign-ins'
import { Foundry } from '@/models'

/** What the sign-in page shows: whose it is, and the ways into a demo. */
export async function loadSignIn(): Promise<{ foundryName: string; demoSignIns: DemoSignIn[] }> {
  const [foundry, demoSignIns] = await Promise.all([Foundry.findByPk(1), loadDemoSignIns()])
  return { foundryName: foundry?.name ?? 'Kilnward', demoSignIns }
}

import { Foundry } from '@/models'

/** False in records that nobody has set up yet. */
export async function hasFoundry(): Promise<boolean> {
  return (await Foundry.count()) > 0
}

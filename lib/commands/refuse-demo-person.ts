import { AppError } from '@/lib/core/errors'
import { Foundry, type Member } from '@/models'

/**
 * Refuses to let in one of the people of a demo that was laid over a foundry: nobody has a password of theirs, and an owner among
 * them would count as one who can sign in.
 *
 * @throws {AppError} conflict.
 */
export async function refuseDemoPerson(row: Member): Promise<void> {
  if (!row.isDemo || (await Foundry.count({ where: { isDemo: true } })) > 0) return
  throw new AppError('conflict', `${row.name} belongs to the demo data: nobody signs in as them. Add a member instead.`)
}

import { Op } from 'sequelize'
import { AppError } from '@/lib/core/errors'
import { Member } from '@/models'

/**
 * Refuses to take away the last owner who can sign in. Belongs inside the transaction of the change: two owners who demote each
 * other at once come one after the other, and the second finds nobody else.
 *
 * An owner whose first password is still open does not count: it may run out unused.
 *
 * @throws {AppError} conflict.
 */
export async function keepAnOwner(leaving: Member): Promise<void> {
  if (leaving.role !== 'owner' || leaving.disabledAt !== null) return
  const others = await Member.count({
    where: { role: 'owner', disabledAt: null, firstPasswordUntil: null, id: { [Op.ne]: leaving.id } },
  })
  if (others === 0) {
    const who = `${leaving.name} is the last owner with a password of their own`
    throw new AppError('conflict', `${who}: without one nobody could look after the people here. Make another owner first.`)
  }
}

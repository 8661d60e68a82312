import type { OwnUnits } from '@/lib/members/own-units'
import { Member } from '@/models'

/** The units that a member has chosen themselves; null where the foundry's are good. */
export async function loadOwnUnits(memberId: string): Promise<OwnUnits> {
  const { tempUnit, massUnit, lengthUnit } = await Member.findByPk(memberId, { rejectOnEmpty: true })
  return { tempUnit, massUnit, lengthUnit }
}

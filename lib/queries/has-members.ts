import { Member } from '@/models'

/** False in records that nobody has made an account in: then the first visitor makes the owner's. */
export async function hasMembers(): Promise<boolean> {
  return (await Member.findOne({ attributes: ['id'] })) !== null
}

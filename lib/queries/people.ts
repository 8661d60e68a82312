import type { Role } from '@/lib/members/roles'
import { Member } from '@/models'

/** A member as the owner sees them. Instants in epoch ms. */
export type Person = {
  id: string
  name: string
  email: string
  role: Role
  createdAt: number
  lastSignedInAt: number | null
  disabledAt: number | null
  /** Set while their password is the one that was made for them. */
  firstPasswordUntil: number | null
  isDemo: boolean
}

const toPerson = ({ id, name, email, role, createdAt, lastSignedInAt, disabledAt, firstPasswordUntil, isDemo }: Member): Person => ({
  id,
  name,
  email,
  role,
  createdAt,
  lastSignedInAt,
  disabledAt,
  firstPasswordUntil,
  isDemo,
})

/** Everybody who works or has worked here: those who may sign in first, each group by name. */
export async function loadPeople(): Promise<Person[]> {
  const people = (await Member.findAll()).map(toPerson)
  return people.toSorted(
    (one, other) => Number(one.disabledAt !== null) - Number(other.disabledAt !== null) || one.name.localeCompare(other.name),
  )
}

/** One member; null when there is none with this id. */
export async function loadPerson(memberId: string): Promise<Person | null> {
  const row = await Member.findByPk(memberId)
  return row && toPerson(row)
}

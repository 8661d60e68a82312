import { describe, expect, it } from 'vitest'
import { may, ROLE_ORDER, rolesFor, ROLES, type Act, type Role } from '@/lib/members/roles'

const ALL: Role[] = ['crew', 'operator', 'supervisor', 'owner']
const FLOOR: Role[] = ['operator', 'supervisor', 'owner']
const OFFICE: Role[] = ['supervisor', 'owner']
const OWNER: Role[] = ['owner']

// Written out by hand: the rule and this list must agree.
const WHO_MAY: Record<Act, Role[]> = {
  see: ALL,
  subscribe: ALL,
  'own password': ALL,
  dip: FLOOR,
  undo: FLOOR,
  hold: FLOOR,
  move: FLOOR,
  evidence: FLOOR,
  read: FLOOR,
  stir: FLOOR,
  fans: FLOOR,
  trees: OFFICE,
  intake: OFFICE,
  'lift hold': OFFICE,
  'look over': OFFICE,
  release: OFFICE,
  correct: OFFICE,
  recipes: OFFICE,
  works: OFFICE,
  places: OFFICE,
  baths: OFFICE,
  sensors: OFFICE,
  history: OFFICE,
  calibrate: OFFICE,
  people: OWNER,
  settings: OWNER,
  upkeep: OWNER,
}
const isAct = (name: string): name is Act => name in WHO_MAY

describe('may', () => {
  it.each(Object.entries(WHO_MAY))('%s: %s', (name, roles) => {
    if (!isAct(name)) throw new Error(name)
    for (const role of ROLES) expect(may(role, name), role).toBe(roles.includes(role))
    expect(rolesFor(name)).toEqual(roles)
  })

  it('ranks every role once', () => {
    expect(ROLE_ORDER.toSorted()).toEqual(ROLES.toSorted())
  })
})

import { AppError } from '@/lib/core/errors'
import { may, type Act, type Role } from '@/lib/members/roles'
import { stubRole } from '@/lib/queries/office-stub'

// Stand-in until sign-in lands on this branch's base.
export type Member = { id: string; name: string; email: string; role: Role; sessionId: string }

function stubMember(): Member {
  const role = stubRole() as Role
  return { id: '0b7f6a52-3a57-4d0e-9e55-6f0c6d0f0001', name: 'Ines Calloway', email: 'ines@example.org', role, sessionId: '' }
}

export async function requireMember(act: Act): Promise<Member> {
  const member = stubMember()
  if (!may(member.role, act)) throw new AppError('forbidden', 'This needs the role supervisor or one above it.')
  return member
}

export async function requireMemberPage(_act: Act, _path: string): Promise<Member> {
  return stubMember()
}

export async function currentMember(): Promise<Member | null> {
  return stubMember()
}

export type Role = 'operator' | 'supervisor' | 'crew' | 'owner'

// Stand-in until members are stored and sign in.
export async function requireMemberPage(..._roles: Role[]): Promise<{ id: string; name: string; role: Role }> {
  return { id: '0b7f6a52-3a57-4d0e-9e55-6f0c6d0f0001', name: 'Maud', role: 'operator' }
}

import type { Role } from '@/lib/members/roles'

/** Everybody of the demo foundry. Those with a password are its sign-ins, one for each role. */
export const DEMO_PEOPLE = [
  { key: 'ines', name: 'Ines Calloway', role: 'supervisor', email: 'ines@marramlane.example', password: 'otter-gate-panel-two' },
  { key: 'maud', name: 'Maud Penhale', role: 'operator', email: 'maud@marramlane.example', password: 'swimmer-at-rest-six' },
  { key: 'wren', name: 'Wren Adeyemi', role: 'crew', email: 'wren@marramlane.example', password: 'tide-bell-at-noon-four' },
  { key: 'tobias', name: 'Tobias Marsh', role: 'owner', email: 'tobias@marramlane.example', password: 'gull-on-a-post-seven' },
  { key: 'halvard', name: 'Halvard Roe', role: 'operator', email: 'halvard@marramlane.example', password: null },
  { key: 'oona', name: 'Oona Fairlie', role: 'operator', email: 'oona@marramlane.example', password: null },
] as const satisfies readonly { key: string; name: string; role: Role; email: string; password: string | null }[]

export type DemoPersonKey = (typeof DEMO_PEOPLE)[number]['key']

/** A documented way into the demo foundry. Printed at the start and shown on its sign-in page: nothing in it is secret. */
export type DemoSignIn = { name: string; role: Role; email: string; password: string }

export const DEMO_SIGN_INS: readonly DemoSignIn[] = DEMO_PEOPLE.flatMap(({ name, role, email, password }) =>
  password === null ? [] : [{ name, role, email, password }],
)

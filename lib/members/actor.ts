import type { Role } from '@/lib/members/roles'

/** Who does something. Commands check what the act's route cannot know; the right to try was checked at the door. */
export type Actor = {
  id: string
  name: string
  role: Role
  /** The browser and system they came from, in words; kept with what they changed. */
  device?: string
  /** One of the demo's own people: what they make is demo data. */
  isDemo?: boolean
}

import { signOut } from 'next-auth/react'
import { forgetThisBrowser } from '@/app/_components/push-browser'

/** Signs out, and turns this browser's notices off first: they are the member's, not the device's. */
export async function signOutHere(): Promise<void> {
  await forgetThisBrowser().catch(() => {})
  await signOut({ callbackUrl: '/sign-in' })
}

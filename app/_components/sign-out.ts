/** Signs out, and turns this browser's notices off first: they are the member's, not the device's. */
export async function signOutHere(): Promise<void> {
  // Fetched when somebody leaves: no page needs either before.
  const [{ signOut }, { forgetThisBrowser }] = await Promise.all([import('next-auth/react'), import('@/app/_components/push-browser')])
  await forgetThisBrowser().catch(() => {})
  await signOut({ callbackUrl: '/sign-in' })
}

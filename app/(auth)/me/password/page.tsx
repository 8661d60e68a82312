import type { Metadata } from 'next'
import { Wordmark } from '@/app/_components/wordmark'
import { LeaveKeys } from '@/app/(auth)/me/password/_components/leave-keys'
import { PasswordChange } from '@/app/(auth)/me/password/_components/password-change'
import { requireMemberPage } from '@/lib/server/auth'
import '../../sign-in/sign-in.css'
import './password.css'

export const metadata: Metadata = { title: 'Your password' }

/** A change of one's own password; with a first password the only page there is. */
export default async function PasswordPage() {
  const member = await requireMemberPage('own password', '/me/password')
  const isFirst = member.mustChangePassword
  return (
    <main className="own-password">
      <Wordmark height={36} />
      <h1>{isFirst ? 'Make your own password' : 'Change your password'}</h1>
      <p className="text-17">
        {isFirst
          ? `${member.name}, the password you came in with was made by somebody else. Make one that only you know; then everything is open.`
          : 'Everywhere else you are signed out with it.'}
      </p>
      <PasswordChange email={member.email} isFirst={isFirst} />
      <LeaveKeys isFirst={isFirst} />
    </main>
  )
}

import type { Metadata } from 'next'
import { Plate } from '@/app/_components/plate'
import { PushDevice } from '@/app/_components/push-device'
import { DeviceList } from '@/app/(office)/me/_components/device-list'
import { systemClock } from '@/lib/core/clock'
import { browserName } from '@/lib/format/browser-name'
import { formatMoment } from '@/lib/format/local-time'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { ownSessions } from '@/lib/queries/own-sessions'
import { requireMemberPage } from '@/lib/server/auth'

export const metadata: Metadata = { title: 'Your page' }

/** The member's own page: who they are here, where they are signed in, and what reaches them. */
export default async function MePage() {
  const member = await requireMemberPage('subscribe', '/me')
  const [{ timeZone }, sessions] = await Promise.all([loadFoundry(), ownSessions(member.id, { clock: systemClock })])
  const now = systemClock.now()
  return (
    <>
      <div className="page-head">
        <div className="min-w-0 grow">
          <h1>{member.name}</h1>
          <p>
            {member.role}, {member.email}
          </p>
        </div>
      </div>
      <div className="flex flex-col gap-6">
        <Plate title="Notices on this device">
          <PushDevice timeZone={timeZone} />
        </Plate>
        <Plate title="Your devices">
          <DeviceList timeZone={timeZone} />
        </Plate>
        <Plate title="Signed in">
          <ul className="flex flex-col gap-3">
            {sessions.map((session) => (
              <li key={session.id}>
                <b>{browserName(session.userAgent)}</b>
                {session.id === member.sessionId && ', here'}
                <br />
                Since {formatMoment(session.createdAt, now, timeZone)}, until {formatMoment(session.expiresAt, now, timeZone)} at the
                latest.
              </li>
            ))}
          </ul>
        </Plate>
      </div>
    </>
  )
}

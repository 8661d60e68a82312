import type { Metadata } from 'next'
import { Icon } from '@/app/_components/icons'
import { KeyLink } from '@/app/_components/key'
import { Plate } from '@/app/_components/plate'
import { PushDevice } from '@/app/_components/push-device'
import { ThemeSwitch } from '@/app/_components/theme-switch'
import { DeviceList } from '@/app/(office)/me/_components/device-list'
import { SessionList } from '@/app/(office)/me/_components/session-list'
import { UnitsForm } from '@/app/(office)/me/_components/units-form'
import { systemClock } from '@/lib/core/clock'
import { browserName } from '@/lib/format/browser-name'
import { formatMoment } from '@/lib/format/local-time'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { ownSessions } from '@/lib/queries/own-sessions'
import { loadOwnUnits } from '@/lib/queries/own-units'
import { requireMemberPage } from '@/lib/server/auth'
import './me.css'

export const metadata: Metadata = { title: 'Your page' }

/** The member's own page: who they are here, what reaches them, how they read, and where they are signed in. */
export default async function MePage({ searchParams }: PageProps<'/me'>) {
  const member = await requireMemberPage('subscribe', '/me')
  const [{ password }, foundry, sessions, units] = await Promise.all([
    searchParams,
    loadFoundry(),
    ownSessions(member.id, { clock: systemClock }),
    loadOwnUnits(member.id),
  ])
  const { timeZone } = foundry
  const now = systemClock.now()
  return (
    <>
      <div className="page-head">
        <div className="min-w-0 grow">
          <h1 className="[overflow-wrap:anywhere]">{member.name}</h1>
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
        <Plate title="How you read" line="for you alone; what is stored does not change">
          <UnitsForm own={units} foundry={foundry.units} />
        </Plate>
        <Plate title="Colours of this device">
          <ThemeSwitch />
        </Plate>
        <Plate title="Password">
          {password === 'changed' && (
            <p className="form-done mb-3" role="status">
              <Icon name="check" />
              <span>Your password is changed. Everywhere else you are signed out.</span>
            </p>
          )}
          <KeyLink href="/me/password">Change the password</KeyLink>
        </Plate>
        <Plate title="Signed in">
          <SessionList
            sessions={sessions.map((session) => ({
              id: session.id,
              device: browserName(session.userAgent),
              isHere: session.id === member.sessionId,
              words: `Since ${formatMoment(session.createdAt, now, timeZone)}, until ${formatMoment(session.expiresAt, now, timeZone)} at the latest.`,
            }))}
          />
        </Plate>
      </div>
    </>
  )
}

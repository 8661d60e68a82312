import type { Metadata } from 'next'
import { notFound } from 'next/navigation'
import { z } from 'zod'
import { KeyLink } from '@/app/_components/key'
import { Plate } from '@/app/_components/plate'
import { FoundryNav } from '@/app/(office)/_components/foundry-nav'
import { AccessForm, RenewForm } from '@/app/(office)/people/[memberId]/_components/access-forms'
import { MemberForm } from '@/app/(office)/people/[memberId]/_components/member-form'
import { PersonMark } from '@/app/(office)/people/_components/person-mark'
import { systemClock } from '@/lib/core/clock'
import { formatDate, formatMoment } from '@/lib/format/local-time'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { loadPerson } from '@/lib/queries/people'
import { requireMemberPage } from '@/lib/server/auth'
import '../people.css'

export const metadata: Metadata = { title: 'Member' }

/** One member: who they are, a way back in when they forgot their password, and the way out. */
export default async function PersonPage({ params }: PageProps<'/people/[memberId]'>) {
  const id = z.uuid().safeParse((await params).memberId)
  const member = await requireMemberPage('people', id.success ? `/people/${id.data}` : '/people')
  const [foundry, person] = await Promise.all([loadFoundry(), id.success ? loadPerson(id.data) : null])
  if (person === null) notFound()
  const { timeZone } = foundry
  const now = systemClock.now()
  const isSelf = person.id === member.id
  const maySignIn = !person.isDemo || foundry.isDemo
  const lastSignedIn =
    person.lastSignedInAt === null ? 'never signed in' : `last signed in ${formatMoment(person.lastSignedInAt, now, timeZone)}`
  return (
    <>
      <FoundryNav role={member.role} />
      <div className="page-head">
        <div className="min-w-0 grow">
          <h1 className="[overflow-wrap:anywhere]">{person.name}</h1>
          <p>
            Here since {formatDate(person.createdAt, timeZone)}, {lastSignedIn}.
          </p>
        </div>
        <KeyLink href="/people" icon="back" tone="quiet">
          All people
        </KeyLink>
      </div>
      <p className="person-stands mb-5 text-18">
        <PersonMark person={person} now={now} timeZone={timeZone} />
      </p>
      <div className="grid gap-6">
        <Plate title="Who they are">
          {/* Another role from elsewhere starts the form anew. */}
          <MemberForm
            key={`${person.name} ${person.email} ${person.role}`}
            memberId={person.id}
            values={{ name: person.name, email: person.email, role: person.role }}
          />
        </Plate>
        {isSelf ? (
          <Plate title="Your password">
            <KeyLink href="/me/password">Change the password</KeyLink>
          </Plate>
        ) : (
          <>
            {person.disabledAt === null && maySignIn && (
              <Plate title="Forgotten password" line="signs them out everywhere; the new one is good for a day and for making their own">
                <RenewForm memberId={person.id} />
              </Plate>
            )}
            {person.disabledAt === null || maySignIn ? (
              <Plate
                title={person.disabledAt === null ? 'Shut out' : 'Let in again'}
                line={
                  person.disabledAt === null
                    ? 'ends their sessions and their notices at once; what they have done stays under their name'
                    : 'with the password they had; notices they turn on again themselves'
                }
              >
                <AccessForm memberId={person.id} isDisabled={person.disabledAt !== null} />
              </Plate>
            ) : (
              <p className="text-17 text-soot">Belongs to the demo data: nobody signs in as {person.name}.</p>
            )}
          </>
        )}
      </div>
    </>
  )
}

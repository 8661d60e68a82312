import type { Metadata } from 'next'
import Link from 'next/link'
import { DemoMark } from '@/app/_components/demo-mark'
import { Plate } from '@/app/_components/plate'
import { FoundryNav } from '@/app/(office)/_components/foundry-nav'
import { AddMemberForm } from '@/app/(office)/people/_components/add-member-form'
import { PersonMark } from '@/app/(office)/people/_components/person-mark'
import { systemClock } from '@/lib/core/clock'
import { formatDate, formatMoment } from '@/lib/format/local-time'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { loadPeople } from '@/lib/queries/people'
import { requireMemberPage } from '@/lib/server/auth'
import './people.css'

export const metadata: Metadata = { title: 'People' }

/** Everybody who works here: who they are, what they may do, and whether they can sign in. */
export default async function PeoplePage() {
  const member = await requireMemberPage('people', '/people')
  const [{ timeZone, isDemo: isDemoFoundry }, people] = await Promise.all([loadFoundry(), loadPeople()])
  const now = systemClock.now()
  const active = people.filter(({ disabledAt }) => disabledAt === null).length
  return (
    <>
      <FoundryNav role={member.role} />
      <div className="page-head">
        <div>
          <h1>People</h1>
          <p>
            {active} {active === 1 ? 'member' : 'members'}
            {people.length > active ? `, ${people.length - active} disabled` : ''}. What somebody has done stays under their name, also
            after they are disabled.
          </p>
        </div>
      </div>
      <div className="grid gap-6">
        <section className="plate people-list" aria-label="Members">
          <table className="table" role="table">
            <thead role="rowgroup">
              <tr role="row">
                {['Name', 'Role', 'E-mail', 'Since', 'Last signed in', 'How they stand'].map((head) => (
                  <th key={head} role="columnheader" scope="col">
                    {head}
                  </th>
                ))}
              </tr>
            </thead>
            <tbody role="rowgroup">
              {people.map((person) => (
                <tr key={person.id} role="row" className={`link-row ${person.disabledAt === null ? '' : 'is-disabled'}`}>
                  <th role="rowheader" scope="row" className="c-name">
                    {/* The link covers its whole row. */}
                    <Link className="row-link" href={`/people/${person.id}`} prefetch={false}>
                      {person.name}
                    </Link>
                    {person.id === member.id && <span className="text-soot">, you</span>} {person.isDemo && !isDemoFoundry && <DemoMark />}
                  </th>
                  <td role="cell" className="c-role">
                    {person.role}
                  </td>
                  <td role="cell" className="c-email">
                    {person.email}
                  </td>
                  <td role="cell" className="c-since">
                    <span className="only-phone text-soot">Since </span>
                    {formatDate(person.createdAt, timeZone)}
                  </td>
                  <td role="cell" className="c-last">
                    <span className="only-phone text-soot">Signed in </span>
                    {person.lastSignedInAt === null ? 'never' : formatMoment(person.lastSignedInAt, now, timeZone)}
                  </td>
                  <td role="cell" className="c-stands">
                    <PersonMark person={person} now={now} timeZone={timeZone} />
                  </td>
                </tr>
              ))}
            </tbody>
          </table>
        </section>
        <Plate title="Add a member" line="they get a first password from you and make their own with it">
          <AddMemberForm />
        </Plate>
      </div>
    </>
  )
}

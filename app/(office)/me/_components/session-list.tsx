'use client'

import { Key } from '@/app/_components/key'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { endOtherSessionsAction, endSessionAction } from '@/app/(office)/me/actions'

/** A session in words, made on the server. */
export type SessionLine = { id: string; device: string; words: string; isHere: boolean }

/** Where the member is signed in, with a key to end each session but this one. */
export function SessionList({ sessions }: { sessions: SessionLine[] }) {
  const others = useKeptForm(endOtherSessionsAction)
  const elsewhere = sessions.filter(({ isHere }) => !isHere)
  return (
    <div className="grid gap-4">
      <ul className="flex flex-col gap-3">
        {sessions.map((session) => (
          <SessionRow key={session.id} session={session} />
        ))}
      </ul>
      {elsewhere.length > 1 && (
        <form {...others.formProps}>
          <Key type="submit" isOff={others.isPending}>
            End the others
          </Key>
        </form>
      )}
      <FormMessage state={others.state} />
    </div>
  )
}

function SessionRow({ session }: { session: SessionLine }) {
  const form = useKeptForm(endSessionAction.bind(null, session.id))
  return (
    <li className="flex flex-wrap items-center gap-x-4 gap-y-2">
      <span className="grow">
        <b>{session.device}</b>
        {session.isHere && ', here'}
        <br />
        {session.words}
      </span>
      {!session.isHere && (
        <form {...form.formProps}>
          <Key type="submit" tone="quiet" isOff={form.isPending} aria-label={`End the session: ${session.device}, ${session.words}`}>
            End
          </Key>
        </form>
      )}
      {form.state.status === 'refused' && <FormMessage state={form.state} />}
    </li>
  )
}

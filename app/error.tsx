'use client'

import { Key, KeyLink } from '@/app/_components/key'
import { MessagePage } from '@/app/_components/message-page'

export default function ErrorPage({ error, retry }: { error: unknown; retry: () => void }) {
  const digest = typeof error === 'object' && error !== null && 'digest' in error ? String(error.digest) : ''
  return (
    <MessagePage
      title="This page could not be shown"
      state="held"
      done={3}
      keys={
        <>
          <Key size={64} tone="go" onPress={retry}>
            Try again
          </Key>
          <KeyLink href="/floor" size={64}>
            To the floor
          </KeyLink>
        </>
      }
    >
      <p>Nothing that was logged is lost. Try again; if it stays, tell the supervisor{digest ? ` and say number ${digest}` : ''}.</p>
    </MessagePage>
  )
}

import { KeyLink } from '@/app/_components/key'
import { MessagePage } from '@/app/_components/message-page'

export default function NotFound() {
  return (
    <MessagePage
      title="Nothing hangs here"
      state="bare"
      done={0}
      keys={
        <>
          <KeyLink href="/floor" size={64} tone="go">
            To the floor
          </KeyLink>
          <KeyLink href="/trees" size={64}>
            All trees
          </KeyLink>
        </>
      }
    >
      <p>There is no page at this address. If you came by a tag, look for its number among the trees.</p>
    </MessagePage>
  )
}

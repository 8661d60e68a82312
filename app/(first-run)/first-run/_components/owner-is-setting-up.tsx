import { MessagePage } from '@/app/_components/message-page'
import { KeyLink } from '@/app/_components/key'
import { LeaveKey } from '@/app/(first-run)/first-run/_components/leave-key'

/** What everybody but an owner sees until the first run is ended. */
export function OwnerIsSettingUp({ name }: { name: string }) {
  return (
    <MessagePage
      title="The owner is setting up the foundry"
      state="bare"
      done={0}
      keys={
        <>
          <KeyLink href="/floor" size={64} tone="go">
            Look again
          </KeyLink>
          <LeaveKey />
        </>
      }
    >
      <p>{name}, your account is ready. The floor opens as soon as the owner has ended the first steps.</p>
    </MessagePage>
  )
}

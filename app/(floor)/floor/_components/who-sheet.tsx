'use client'

import { signOutHere } from '@/app/_components/sign-out'
import { Key, KeyLink } from '@/app/_components/key'
import { ThemeSwitch } from '@/app/_components/theme-switch'
import { Sheet } from './sheet'

/** Whose hand it is, the scheme of this screen, and the way out. */
export function WhoSheet({ memberName, role, onClose }: { memberName: string; role: string; onClose: () => void }) {
  return (
    <Sheet
      label="Who is signed in"
      heading={memberName}
      under={`Signed in as ${role}. What is logged here is in this name.`}
      isTop
      onClose={onClose}
    >
      <div className="grid gap-8">
        <div className="flex flex-wrap gap-3">
          <KeyLink href="/me" size={64}>
            My own page
          </KeyLink>
          <KeyLink href="/trees" size={64} icon="tag">
            Office: trees
          </KeyLink>
        </div>
        <div className="grid gap-2">
          <p className="choice-label">Colours of this screen</p>
          <ThemeSwitch size={64} />
        </div>
        <div>
          <Key size={64} onPress={() => void signOutHere()}>
            Sign out
          </Key>
        </div>
      </div>
    </Sheet>
  )
}

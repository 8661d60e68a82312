'use client'

import { Key } from '@/app/_components/key'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { backUpNowAction } from '@/app/(office)/upkeep/actions'

/** Makes a backup by hand, and gives the newest one out. */
export function BackUpNow({ hasBackup }: { hasBackup: boolean }) {
  const form = useKeptForm(backUpNowAction)
  return (
    <div className="upkeep-acts">
      <form {...form.formProps}>
        <Key type="submit" tone="go" isOff={form.isPending}>
          {form.isPending ? 'Copying' : 'Back up now'}
        </Key>
      </form>
      {hasBackup && (
        <a className="key" href="/api/v1/backups/newest" download>
          Download the newest
        </a>
      )}
      <FormMessage state={form.state} />
    </div>
  )
}

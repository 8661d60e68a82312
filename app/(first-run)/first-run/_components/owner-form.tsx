'use client'

import { useSyncExternalStore } from 'react'
import { Field } from '@/app/_components/field'
import { Key } from '@/app/_components/key'
import { ShellSection } from '@/app/_components/shell-section'
import { Wordmark } from '@/app/_components/wordmark'
import { makeFirstOwnerAction } from '@/app/(first-run)/first-run/actions'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import type { BandGrade } from '@/lib/trees/section'
import '@/app/(auth)/sign-in/sign-in.css'

const RECIPE: BandGrade[] = ['fine', 'fine', 'medium', 'medium', 'coarse', 'coarse', 'coarse', 'seal']

const neverChanges = () => () => {}
const browserZone = () => Intl.DateTimeFormat().resolvedOptions().timeZone

/** The first visitor makes the owner's account; the next one finds the sign-in here. */
export function OwnerForm({ asksForCode }: { asksForCode: boolean }) {
  const form = useKeptForm(makeFirstOwnerAction)
  // Known to the browser alone: the server may stand in another zone.
  const timeZone = useSyncExternalStore(neverChanges, browserZone, () => 'UTC')
  return (
    <div className="sign-in">
      <div className="sign-in-picture" aria-hidden="true">
        <ShellSection
          coats={RECIPE.map((grade) => ({ grade }))}
          done={0}
          open={null}
          state="bare"
          target={0.9}
          height={1100}
          unit={6.2}
          isDecoration
        />
      </div>
      <main>
        <Wordmark height={46} />
        <h1>Set up your foundry</h1>
        <p className="text-17 text-soot">
          Nobody has an account here yet. This one is the owner’s: who makes it sets up the foundry and adds the others.
        </p>
        <form {...form.formProps} className="sign-in-form">
          <input type="hidden" name="timeZone" value={timeZone} />
          {asksForCode && (
            <Field
              name="setupCode"
              label="Setup code"
              hint="The start has printed it on the server’s terminal. Others can reach this page too."
              error={form.errorOf('setupCode')}
              autoComplete="off"
              autoCapitalize="characters"
              spellCheck={false}
            />
          )}
          <Field name="name" label="Your name" error={form.errorOf('name')} maxLength={80} autoComplete="name" />
          <Field
            name="email"
            label="E-mail"
            hint="You sign in with it. Nothing is sent to it."
            error={form.errorOf('email')}
            inputMode="email"
            autoComplete="username"
            autoCapitalize="none"
            spellCheck={false}
            maxLength={254}
          />
          <Field
            name="password"
            label="Password"
            type="password"
            hint="12 characters or more. A few words that only you would put together."
            error={form.errorOf('password')}
            autoComplete="new-password"
          />
          <FormMessage state={form.state} />
          <Key type="submit" tone="go" size={64} className="text-24" isOff={form.isPending}>
            Make the owner’s account
          </Key>
        </form>
      </main>
    </div>
  )
}

'use client'

import { signIn } from 'next-auth/react'
import { useRef, useState, type FormEvent } from 'react'
import { Field } from '@/app/_components/field'
import { Icon } from '@/app/_components/icons'
import { Key } from '@/app/_components/key'

export type DemoSignIn = { name: string; role: string; email: string; password: string }

/** The server's word for why not, as a sentence. */
function refusalSentence(error: string): string {
  const wait = /^WAIT:(\d+)$/.exec(error)
  if (wait) return `Too many tries. Wait ${wait[1]} s, then try again.`
  if (error === 'FIRST_PASSWORD_OVER') return 'This first password has run out. Ask the owner of the foundry for a new one.'
  if (error === 'CredentialsSignin') return 'E-mail or password is not right.'
  return 'Signing in did not work. Try again; if it stays, ask the supervisor.'
}

export function SignInForm({ goTo, demoSignIns, hasEnded }: { goTo: string; demoSignIns: DemoSignIn[]; hasEnded: boolean }) {
  const [email, setEmail] = useState('')
  const [password, setPassword] = useState('')
  const [problem, setProblem] = useState<string>()
  const [isSending, setIsSending] = useState(false)
  const passwordField = useRef<HTMLInputElement>(null)

  const send = async (withEmail: string, withPassword: string) => {
    if (isSending) return
    setIsSending(true)
    setProblem(undefined)
    try {
      const answer = await signIn('credentials', { email: withEmail, password: withPassword, redirect: false })
      if (answer?.ok && !answer.error) {
        // A full load, so that nothing of the signed-out page stays behind.
        window.location.assign(goTo)
        return
      }
      setProblem(refusalSentence(answer?.error ?? ''))
    } catch {
      setProblem('The server did not answer. Check the network, then try again.')
    }
    setIsSending(false)
    setPassword('')
    passwordField.current?.focus()
  }

  const submit = (event: FormEvent) => {
    event.preventDefault()
    if (email.trim() === '' || password === '') {
      setProblem(email.trim() === '' ? 'Type your e-mail.' : 'Type your password.')
      return
    }
    void send(email.trim(), password)
  }

  return (
    <>
      {/* Sent before the page has woken, a form without a method would put the password into the address. */}
      <form className="sign-in-form" method="post" onSubmit={submit} noValidate>
        <Field
          label="E-mail"
          name="email"
          type="email"
          autoComplete="username"
          inputMode="email"
          autoCapitalize="none"
          spellCheck={false}
          value={email}
          onChange={(event) => setEmail(event.target.value)}
        />
        <Field
          ref={passwordField}
          label="Password"
          name="password"
          type="password"
          autoComplete="current-password"
          value={password}
          onChange={(event) => setPassword(event.target.value)}
        />
        {hasEnded && !problem && (
          <p className="sign-in-ended text-17">
            <Icon name="warning" />
            <span>You are signed out here: the session has ended. Sign in again; what was not logged yet is not on the log.</span>
          </p>
        )}
        <div role="alert" aria-live="assertive">
          {problem && (
            <p className="field-error text-17">
              <Icon name="warning" />
              <span>{problem}</span>
            </p>
          )}
        </div>
        <Key type="submit" tone="go" size={64} className="text-24">
          {isSending ? 'Signing in' : 'Sign in'}
        </Key>
      </form>
      <p className="text-17 text-soot">Forgotten password: ask the owner of the foundry for a new one.</p>
      {demoSignIns.length > 0 && (
        <section className="demo-sign-ins" aria-label="Demo sign-ins">
          <h2>Demo foundry: sign in as</h2>
          <ul>
            {demoSignIns.map((demo) => (
              <li key={demo.email}>
                <Key
                  size={56}
                  aria-label={`Sign in as ${demo.name}, ${demo.role}`}
                  onPress={() => {
                    setEmail(demo.email)
                    void send(demo.email, demo.password)
                  }}
                >
                  {demo.name}
                </Key>
                <span>
                  <b>{demo.role}</b>
                  <span>{demo.email}</span>
                  <span>{demo.password}</span>
                </span>
              </li>
            ))}
          </ul>
        </section>
      )}
    </>
  )
}

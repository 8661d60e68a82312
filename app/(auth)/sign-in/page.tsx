import type { Metadata } from 'next'
import { redirect } from 'next/navigation'
import { ShellSection } from '@/app/_components/shell-section'
import { Wordmark } from '@/app/_components/wordmark'
import { SignInForm } from '@/app/(auth)/sign-in/_components/sign-in-form'
import { ownPath } from '@/lib/members/own-path'
import { hasMembers } from '@/lib/queries/has-members'
import { loadSignIn } from '@/lib/queries/sign-in'
import type { BandGrade } from '@/lib/trees/section'
import './sign-in.css'

export const metadata: Metadata = { title: 'Sign in' }

const RECIPE: BandGrade[] = ['fine', 'fine', 'medium', 'medium', 'coarse', 'coarse', 'coarse']

export default async function SignInPage({ searchParams }: PageProps<'/sign-in'>) {
  const { callbackUrl, ended } = await searchParams
  if (!(await hasMembers())) redirect('/first-run')
  const { foundryName, demoSignIns } = await loadSignIn()
  // The origin stands for this site; whatever leads elsewhere becomes '/', which goes to the floor.
  const goTo = ownPath(typeof callbackUrl === 'string' ? callbackUrl : '/floor', 'http://this.site')
  return (
    <div className="sign-in">
      <div className="sign-in-picture" aria-hidden="true">
        <ShellSection
          coats={RECIPE.map((grade) => ({ grade }))}
          done={4}
          open={{ dry: 0.48 }}
          state="drying"
          target={0.9}
          height={1100}
          unit={6.2}
          isDecoration
        />
      </div>
      <main>
        <Wordmark height={46} />
        <h1>{foundryName}</h1>
        <p className="text-17 text-soot">Shell room log</p>
        <SignInForm goTo={goTo} demoSignIns={demoSignIns} hasEnded={ended === '1'} />
      </main>
    </div>
  )
}

import Link from 'next/link'
import type { ReactNode } from 'react'
import { Icon } from '@/app/_components/icons'
import { ThemeKey } from '@/app/_components/theme-switch'
import { Wordmark } from '@/app/_components/wordmark'
import { LeaveKey } from '@/app/(first-run)/first-run/_components/leave-key'
import { FIRST_RUN_STEPS, FIRST_RUN_WORDS, isStepOpen, type FirstRunStep } from '@/lib/foundry/first-run'

/** The frame of the steps: where one is, what is done, and the way back to it. */
export function FirstRunFrame({ step, reached, children }: { step: FirstRunStep; reached: FirstRunStep; children: ReactNode }) {
  return (
    <div className="first-run">
      <header className="first-run-bar">
        <Wordmark height={36} />
        <span className="first-run-keys">
          <ThemeKey />
          <LeaveKey />
        </span>
      </header>
      <div className="first-run-body">
        <nav aria-label="Steps">
          <p className="first-run-where">
            Step {FIRST_RUN_STEPS.indexOf(step) + 1} of {FIRST_RUN_STEPS.length}
          </p>
          <ol>
            {FIRST_RUN_STEPS.map((each, index) => (
              <li key={each}>
                <StepLink step={each} number={index + 1} isCurrent={each === step} reached={reached} />
              </li>
            ))}
          </ol>
        </nav>
        <main id="page">{children}</main>
      </div>
    </div>
  )
}

function StepLink({ step, number, isCurrent, reached }: { step: FirstRunStep; number: number; isCurrent: boolean; reached: FirstRunStep }) {
  const isDone = step !== reached && isStepOpen(step, reached)
  const inside = (
    <>
      <span className="first-run-mark">{isDone ? <Icon name="check" /> : number}</span>
      {FIRST_RUN_WORDS[step]}
      {isDone && <span className="vh">, done</span>}
    </>
  )
  if (!isStepOpen(step, reached)) return <span className="first-run-step is-to-come">{inside}</span>
  return (
    <Link
      className={`first-run-step${isDone ? ' is-done' : ''}`}
      href={`/first-run?step=${step}`}
      prefetch={false}
      aria-current={isCurrent ? 'step' : undefined}
    >
      {inside}
    </Link>
  )
}

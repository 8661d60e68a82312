'use client'

import { ActForm } from '@/app/(office)/settings/_components/act-form'
import { acceptFactorAction } from '@/app/(office)/calibration/actions'
import type { AcceptFactorInput } from '@/lib/calibration/calibration-input'
import { factorVerdictWords, factorWords, learnedWords } from '@/lib/calibration/calibration-words'
import type { FactorProposal } from '@/lib/calibration/proposals'

export type FactorRow = {
  name: string
  proposal: FactorProposal<string>
  input: AcceptFactorInput
  /** Why there is no proposal, where there is nothing to hold its coats against. */
  nothingToCompare: string
}

/** Factors with what finished coats say of each, and the key that takes it over. */
export function FactorRows({ rows }: { rows: readonly FactorRow[] }) {
  return (
    <ul className="factor-rows">
      {rows.map(({ name, proposal, input, nothingToCompare }) => (
        <li key={name}>
          <div className="min-w-0">
            <h3>{name}</h3>
            <p>
              Factor <span className="num">{factorWords(proposal.factorBefore)}</span>
              {proposal.verdict === 'change' && (
                <b>
                  {' '}
                  to <span className="num">{factorWords(proposal.factorAfter)}</span>
                </b>
              )}
              . {factorVerdictWords(proposal, nothingToCompare)}
              {proposal.learned.count > 0 && (
                <span className="text-soot">
                  {' '}
                  Their need differs by {learnedWords(proposal.learned)}, by{' '}
                  {proposal.learned.count === 1 ? '1 coat' : `${proposal.learned.count} coats`}.
                </span>
              )}
            </p>
          </div>
          {proposal.verdict === 'change' && (
            <ActForm action={() => acceptFactorAction(input)} label={`Take over the factor of ${name}`}>
              Take over
            </ActForm>
          )}
        </li>
      ))}
    </ul>
  )
}

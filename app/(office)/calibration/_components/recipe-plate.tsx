'use client'

import Link from 'next/link'
import { useState } from 'react'
import { FieldError } from '@/app/_components/field'
import { Key } from '@/app/_components/key'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { acceptCoatsAction } from '@/app/(office)/calibration/actions'
import { coatVerdictWords, learnedWords, signedDuration } from '@/lib/calibration/calibration-words'
import { wholeNumber } from '@/lib/format/units'
import type { RecipeCalibration } from '@/lib/queries/calibration'
import { shortNumber } from '@/lib/recipes/coat-cells'

/** What finished coats say of one recipe, coat by coat; those that ask for it can be taken over as one new version. */
export function RecipePlate({ recipe }: { recipe: RecipeCalibration }) {
  const told = recipe.coats.filter(({ learned }) => learned.count > 0)
  const untold = recipe.coats.length - told.length
  const open = told.filter(({ isOpen }) => isOpen)
  const [unticked, setUnticked] = useState<ReadonlySet<number>>(new Set())
  const form = useKeptForm(acceptCoatsAction.bind(null, recipe.id))
  const ticked = open.filter(({ coat }) => !unticked.has(coat.number))
  const tick = (number: number, isTicked: boolean) => {
    const next = new Set(unticked)
    if (isTicked) next.delete(number)
    else next.add(number)
    setUnticked(next)
  }
  return (
    <section className="plate" aria-label={recipe.name}>
      <header>
        <h2>
          <Link href={`/recipes/${recipe.id}`} prefetch={false}>
            {recipe.name}
          </Link>
        </h2>
        <p>version {recipe.version}, the newest</p>
      </header>
      <form {...form.formProps}>
        <input type="hidden" name="follows" value={recipe.version} />
        {told.length > 0 && (
          <div className="calibration-table">
            <table className="table">
              <thead>
                <tr>
                  <th scope="col">Coat</th>
                  <th scope="col" className="right">
                    Need, reference h
                  </th>
                  <th scope="col" className="right">
                    Finished coats say
                  </th>
                  <th scope="col" className="right">
                    Coats
                  </th>
                  <th scope="col">Standing</th>
                  <th scope="col" className="right">
                    P10 to P90
                  </th>
                  <th scope="col" className="right">
                    Later than likely
                  </th>
                </tr>
              </thead>
              <tbody>
                {told.map(({ coat, learned, verdict, needAfter, isOpen, check }, index) => (
                  <tr key={coat.number}>
                    <th scope="row">
                      {isOpen ? (
                        <label className="tick">
                          <input
                            type="checkbox"
                            name="coat"
                            value={`${coat.number} ${needAfter}`}
                            checked={!unticked.has(coat.number)}
                            onChange={(event) => tick(coat.number, event.currentTarget.checked)}
                          />
                          <CoatName coat={coat} />
                        </label>
                      ) : (
                        <span className="tick-none">
                          <CoatName coat={coat} />
                        </span>
                      )}
                    </th>
                    <td className="right num whitespace-nowrap">
                      {shortNumber(coat.needReferenceHours)}
                      {verdict === 'change' && <b> to {shortNumber(needAfter)}</b>}
                    </td>
                    <td className="right num whitespace-nowrap">{learnedWords(learned)}</td>
                    <td className="right num">{learned.count}</td>
                    <td>{coatVerdictWords(told[index]!)}</td>
                    <td className="right num whitespace-nowrap">{check.count === 0 ? '–' : `${check.inside} of ${check.count}`}</td>
                    <td className="right num whitespace-nowrap">{check.biasMinutes === null ? '–' : signedDuration(check.biasMinutes)}</td>
                  </tr>
                ))}
              </tbody>
            </table>
          </div>
        )}
        <div className="calibration-foot">
          {untold > 0 && <p className="text-soot">{untoldWords(untold, told.length)}</p>}
          <FieldError id={`coats-${recipe.id}`} error={form.errorOf('coats')} />
          {open.length > 0 && (
            <>
              {recipe.movableTrees > 0 && (
                <label className="tick">
                  <input type="checkbox" name="isMovingTrees" value="yes" />
                  <span>Move {movableWords(recipe)} of this recipe along, for the coats not on yet</span>
                </label>
              )}
              <p className="text-soot">
                A new version: the ticked needs change or are confirmed, everything else stays. Coats that are on keep their need
                {recipe.openTrees > 0 ? '; trees that are not moved stay on their version until somebody moves them' : ''}.
              </p>
            </>
          )}
          <div className="flex flex-wrap items-center gap-3">
            {open.length > 0 && (
              <Key type="submit" tone="go" isOff={form.isPending || ticked.length === 0}>
                {ticked.length === 0
                  ? 'Tick the coats to take over'
                  : `Make version ${recipe.version + 1} with ${coatsWord(ticked.length)}`}
              </Key>
            )}
            <FormMessage state={form.state} />
          </div>
        </div>
      </form>
    </section>
  )
}

function movableWords({ movableTrees, openTrees }: RecipeCalibration): string {
  if (movableTrees < openTrees) return `${movableTrees} of the ${openTrees} open trees`
  return openTrees === 1 ? 'the one open tree' : `the ${openTrees} open trees`
}

const coatsWord = (count: number) => (count === 1 ? '1 coat' : `${wholeNumber(count)} coats`)

function untoldWords(untold: number, told: number): string {
  if (told === 0) return 'No finished coat of this recipe tells anything yet: weigh or feel its coats while they dry.'
  return `Of ${untold === 1 ? 'the other coat' : `the other ${untold} coats`} no finished coat tells anything yet.`
}

function CoatName({ coat }: { coat: RecipeCalibration['coats'][number]['coat'] }) {
  return (
    <span className="whitespace-nowrap">
      <span className="num">{coat.number}</span> {coat.kind}
      {coat.stucco === 'none' || coat.kind === 'seal' ? '' : `, ${coat.stucco}`}
    </span>
  )
}

'use client'

import { AddPlate } from '@/app/(office)/settings/_components/add-plate'
import { ActForm } from '@/app/(office)/settings/_components/act-form'
import { RetiredFold } from '@/app/(office)/settings/_components/retired-fold'
import { RowPlate } from '@/app/(office)/settings/_components/row-plate'
import { BathForm } from '@/app/(office)/settings/baths/_components/bath-form'
import { retireBathAction, reuseBathAction } from '@/app/(office)/settings/baths/actions'
import { formatMoment } from '@/lib/format/local-time'
import type { BathRow } from '@/lib/queries/bath-list'

type Baths = { inUse: BathRow[]; retired: BathRow[] }

const KIND_LINES = { face: 'for face coats', backup: 'for backup, core fill and seal coats' } as const

/** The baths in use with their forms, the key that adds one, and those that are retired. */
export function BathRows({ baths: { inUse, retired }, now, timeZone }: { baths: Baths; now: number; timeZone: string }) {
  const stirred = ({ stirredAt, stirredBy }: BathRow) =>
    stirredAt === null ? 'Not stirred yet.' : `Last stirred ${formatMoment(stirredAt, now, timeZone)} by ${stirredBy ?? 'somebody'}.`
  return (
    <>
      <AddPlate
        words="Add a bath"
        empty={
          inUse.length > 0
            ? null
            : {
                title: 'No bath yet',
                text: 'Every slurry that trees are dipped in stands here. Recipes name the bath of each coat, so a bath comes before a recipe.',
              }
        }
        renderForm={(onDone) => <BathForm onDone={onDone} />}
      />
      <ul className="settings-rows">
        {inUse.map((bath) => (
          <RowPlate
            key={bath.id}
            title={bath.name}
            isDemo={bath.isDemo}
            line={KIND_LINES[bath.kind]}
            form={<BathForm bath={bath} />}
            keys={
              <ActForm action={() => retireBathAction(bath.id)} label={`Retire ${bath.name}`}>
                Retire
              </ActForm>
            }
          >
            <p>{stirred(bath)}</p>
          </RowPlate>
        ))}
      </ul>
      <RetiredFold count={retired.length}>
        {retired.map((bath) => (
          <RowPlate
            key={bath.id}
            title={bath.name}
            isDemo={bath.isDemo}
            line="retired"
            keys={
              <ActForm action={() => reuseBathAction(bath.id)} label={`Use ${bath.name} again`}>
                Use again
              </ActForm>
            }
          >
            <p>{stirred(bath)}</p>
          </RowPlate>
        ))}
      </RetiredFold>
    </>
  )
}

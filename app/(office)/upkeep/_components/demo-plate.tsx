'use client'

import { HoldKey } from '@/app/_components/hold-key'
import { Key } from '@/app/_components/key'
import { Plate } from '@/app/_components/plate'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { layDemoAction, removeDemoAction } from '@/app/(office)/upkeep/demo-actions'
import type { DemoStanding } from '@/lib/foundry/demo-standing'
import type { FormState } from '@/lib/server/form-state'

/** The demo data: laid over a floor without trees, and removed again, each in one step. */
export function DemoPlate({ standing }: { standing: DemoStanding }) {
  const lay = useKeptForm(layDemoAction)
  const remove = useKeptForm(removeDemoAction)
  return (
    <Plate title="Demo data" line={LINES[standing]}>
      <div className="grid justify-items-start gap-4">
        <p className="max-w-[70ch]">{WORDS[standing]}</p>
        {(standing === 'none' || standing === 'has trees') && (
          <form {...lay.formProps}>
            <Key type="submit" isOff={lay.isPending || standing === 'has trees'}>
              {lay.isPending ? 'Laying it: up to a minute' : 'Lay the demo data'}
            </Key>
          </form>
        )}
        {(standing === 'laid over' || standing === 'all demo') && (
          <form {...remove.formProps}>
            <HoldKey size={44} tone="alarm" isOff={remove.isPending} onConfirm={remove.submit}>
              {remove.isPending ? 'Removing it' : standing === 'all demo' ? 'Hold to empty the foundry' : 'Hold to remove the demo data'}
            </HoldKey>
          </form>
        )}
        <FormMessage state={lastWord(standing, lay.state, remove.state)} />
      </div>
    </Plate>
  )
}

/** The word of the act that led to how it stands, or of the one that was refused. */
function lastWord(standing: DemoStanding, laid: FormState, removed: FormState): FormState {
  const isThere = standing === 'laid over' || standing === 'all demo'
  const [last, refusable] = isThere ? [laid, removed] : [removed, laid]
  return refusable.status === 'refused' ? refusable : last
}

const LINES: Record<DemoStanding, string> = {
  none: 'none here',
  'has trees': 'none here',
  'laid over': 'laid over your foundry',
  'all demo': 'this foundry is the demo',
}

const WORDS: Record<DemoStanding, string> = {
  none: 'Invented people, trees, places and two weeks of air, to see how a full floor looks. Its people cannot sign in, everything of it is marked ‘Demo’, and it goes away again in one step.',
  'has trees': 'Demo data is only for a foundry that never had a tree. Yours has, if only a scrapped one.',
  'laid over':
    'Removing it takes every row that it brought, and what was done on it. Your own rows stay as they are; what of the demo your own trees stand on stays too, without its mark, and is named.',
  'all demo':
    'Removing it takes everything: people, trees, settings, history. Everybody is signed out, and the next page makes the owner’s account of a foundry of your own. Make a backup first if you want to keep something.',
}

import { Key } from '@/app/_components/key'
import { Field } from '@/app/_components/field'
import type { TempUnit } from '@/lib/format/units'

/** Two days and a key: the door answers with a file, a month at the most. */
export function RangeForm({ action, tempUnit, today }: { action: string; tempUnit: TempUnit; today: string }) {
  return (
    <form className="range-form" action={action} method="get">
      {tempUnit === 'degF' && <input type="hidden" name="temp" value="degF" />}
      <Field name="from" label="From" type="date" required max={today} defaultValue={today} />
      <Field name="to" label="To" type="date" required max={today} defaultValue={today} />
      <Key type="submit">Whole days as a file</Key>
    </form>
  )
}

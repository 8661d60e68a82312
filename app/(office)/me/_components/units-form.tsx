'use client'

import { SelectField } from '@/app/_components/field'
import { Key } from '@/app/_components/key'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { saveUnitsAction } from '@/app/(office)/me/actions'
import { LENGTH_UNITS, MASS_UNITS, TEMP_UNITS, UNIT_SIGNS, type Units } from '@/lib/format/units'
import type { OwnUnits } from '@/lib/members/own-units'

const CHOICES = [
  { name: 'tempUnit', label: 'Temperature', units: TEMP_UNITS, of: 'temp' },
  { name: 'massUnit', label: 'Mass', units: MASS_UNITS, of: 'mass' },
  { name: 'lengthUnit', label: 'Length', units: LENGTH_UNITS, of: 'length' },
] as const

/** The units of every page, for this member only. */
export function UnitsForm({ own, foundry }: { own: OwnUnits; foundry: Units }) {
  const form = useKeptForm(saveUnitsAction)
  return (
    <form {...form.formProps} className="grid gap-4">
      <div className="own-units">
        {CHOICES.map(({ name, label, units, of }) => (
          <SelectField key={name} name={name} label={label} defaultValue={own[name] ?? ''} error={form.errorOf(name)}>
            <option value="">As the foundry has it ({UNIT_SIGNS[foundry[of]]})</option>
            {units.map((unit) => (
              <option key={unit} value={unit}>
                {UNIT_SIGNS[unit]}
              </option>
            ))}
          </SelectField>
        ))}
      </div>
      <div className="flex flex-wrap items-center gap-3">
        <Key type="submit" isOff={form.isPending}>
          Save the units
        </Key>
        <FormMessage state={form.state} />
      </div>
    </form>
  )
}

'use client'

import { useState } from 'react'
import { Key } from '@/app/_components/key'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { ClockPair } from '@/app/(office)/settings/_components/clock-pair'
import { saveHoursAction } from '@/app/(office)/settings/hours/actions'
import '@/app/(office)/settings/settings.css'
import { formatMinute } from '@/lib/schedule/clock-text'
import type { ShiftHours } from '@/lib/schedule/shifts'
import { WEEKDAYS, weekdayWord } from '@/lib/schedule/week-words'

const USUAL = { opens: '07:00', closes: '16:30' }

/** The shift hours of the week. It stands alone on any page. */
export function HoursForm({ hours, onDone }: { hours: readonly ShiftHours[]; onDone?: () => void }) {
  const form = useKeptForm(saveHoursAction, onDone)
  const [days, setDays] = useState(() =>
    WEEKDAYS.map((weekday) => {
      const row = hours.find((candidate) => candidate.weekday === weekday)
      return row
        ? { isOpen: true, opens: formatMinute(row.opensMinute), closes: formatMinute(row.closesMinute) }
        : // A foundry that has set no hours yet most likely works Monday to Friday.
          { isOpen: hours.length === 0 && weekday <= 5, ...USUAL }
    }),
  )
  const change = (index: number, part: Partial<(typeof days)[number]>) =>
    setDays(days.map((day, at) => (at === index ? { ...day, ...part } : day)))
  return (
    <form {...form.formProps} className="settings-form">
      <fieldset className="week">
        <legend className="vh">Shift hours of the week</legend>
        {days.map((day, index) => {
          const word = weekdayWord(index + 1)
          const name = (field: string) => `days.${index}.${field}`
          return (
            <div key={word} className="week-day">
              <label className="tick week-name">
                <input
                  type="checkbox"
                  name={name('isOpen')}
                  checked={day.isOpen}
                  onChange={(event) => change(index, { isOpen: event.currentTarget.checked })}
                />
                <span>{word}</span>
              </label>
              <div className="week-spans">
                {day.isOpen ? (
                  <ClockPair
                    about={`${word}, open`}
                    from={{ name: name('opens'), value: day.opens, error: form.errorOf(name('opens')) }}
                    to={{ name: name('closes'), value: day.closes, error: form.errorOf(name('closes')) }}
                    onChange={({ from, to }) => change(index, { opens: from, closes: to })}
                  />
                ) : (
                  <span className="week-none">Closed</span>
                )}
              </div>
            </div>
          )
        })}
        {form.errorOf('days') !== undefined && (
          <p className="field-error" role="alert">
            {form.errorOf('days')}
          </p>
        )}
      </fieldset>
      <div className="form-foot">
        <Key type="submit" tone="go" isOff={form.isPending}>
          Save the hours
        </Key>
        <FormMessage state={form.state} isLongForm />
      </div>
    </form>
  )
}

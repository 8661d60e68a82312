'use client'

import { useRef, useState } from 'react'
import { Key } from '@/app/_components/key'
import type { KeptForm } from '@/app/(office)/_components/use-kept-form'
import { ClockPair } from '@/app/(office)/settings/_components/clock-pair'
import type { PlaceFormValues } from '@/lib/room/place-input'
import { WEEKDAYS, weekdayWord } from '@/lib/schedule/week-words'

const MOST_SPANS_A_DAY = 4

type Row = PlaceFormValues['fans'][number] & { key: number }

/** When the fans of a place run: several stretches for each weekday. Outside them they are off. */
export function FanWeek({ fans, errorOf }: { fans: PlaceFormValues['fans']; errorOf: KeptForm['errorOf'] }) {
  const nextKey = useRef(fans.length)
  const [rows, setRows] = useState<Row[]>(() => fans.map((span, key) => ({ ...span, key })))
  const withKey = (span: PlaceFormValues['fans'][number]): Row => ({ ...span, key: (nextKey.current += 1) })
  const inOrder = WEEKDAYS.flatMap((weekday) => rows.filter((row) => row.weekday === weekday))
  const monday = rows.filter((row) => row.weekday === 1)
  const copyMonday = () =>
    setRows(WEEKDAYS.flatMap((weekday) => (weekday === 1 ? monday : monday.map(({ on, off }) => withKey({ weekday, on, off })))))
  return (
    <fieldset className="week">
      <legend className="label">When its fans run</legend>
      <p className="field-hint">Wall-clock time, closed days too. Outside these hours the fans are off.</p>
      {WEEKDAYS.map((weekday) => {
        const day = inOrder.filter((row) => row.weekday === weekday)
        const word = weekdayWord(weekday)
        return (
          <div key={weekday} className="week-day">
            <span className="week-name">{word}</span>
            <div className="week-spans">
              {day.length === 0 && <span className="week-none">Off all day</span>}
              {day.map((row) => {
                const name = (field: string) => `fans.${inOrder.indexOf(row)}.${field}`
                return (
                  <div key={row.key} className="week-span">
                    <input type="hidden" name={name('weekday')} value={weekday} />
                    <ClockPair
                      about={`${word}, fans on`}
                      from={{ name: name('on'), value: row.on, error: errorOf(name('on')) }}
                      to={{ name: name('off'), value: row.off, error: errorOf(name('off')) }}
                      onChange={({ from, to }) =>
                        setRows(rows.map((other) => (other.key === row.key ? { ...row, on: from, off: to } : other)))
                      }
                    />
                    <Key
                      tone="quiet"
                      icon="minus"
                      aria-label={`Take ${word} ${row.on} to ${row.off} away`}
                      onPress={() => setRows(rows.filter((other) => other.key !== row.key))}
                    >
                      {null}
                    </Key>
                  </div>
                )
              })}
            </div>
            <div className="week-keys">
              {day.length < MOST_SPANS_A_DAY && (
                <Key
                  tone="quiet"
                  icon="plus"
                  aria-label={`Add hours on ${word}`}
                  onPress={() => setRows([...rows, withKey({ weekday, on: '', off: '' })])}
                >
                  {null}
                </Key>
              )}
              {weekday === 1 && monday.length > 0 && (
                <Key tone="quiet" onPress={copyMonday}>
                  Same every day
                </Key>
              )}
            </div>
          </div>
        )
      })}
      {errorOf('fans') !== undefined && <p className="field-error">{errorOf('fans')}</p>}
    </fieldset>
  )
}

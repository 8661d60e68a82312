'use client'

import { keepPreviousData, useQuery } from '@tanstack/react-query'
import { useState } from 'react'
import { Field, SelectField } from '@/app/_components/field'
import { Icon } from '@/app/_components/icons'
import { Key } from '@/app/_components/key'
import { useUnits } from '@/app/_components/units-context'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { PreviewRows } from '@/app/(office)/room/upload/_components/preview-rows'
import { importUploadAction } from '@/app/(office)/room/upload/actions'
import { formatClock, formatDateOfYear } from '@/lib/format/local-time'
import { TEMP_UNITS, UNIT_SIGNS } from '@/lib/format/units'
import { fieldErrors } from '@/lib/trees/tree-form-values'
import { uploadPreview, type UploadPreview } from '@/lib/uploads/upload-contract'
import { DATE_FORMS, DELIMITERS, ENCODINGS, FIXED_OFFSETS, uploadSettings, type UploadSettings } from '@/lib/uploads/upload-settings'
import { countText } from '@/lib/uploads/upload-state'

async function fetchPreview(uploadId: string, settings: UploadSettings): Promise<UploadPreview> {
  const words = new URLSearchParams({ settings: JSON.stringify(settings) })
  const response = await fetch(`/api/v1/uploads/${uploadId}/preview?${words}`)
  if (!response.ok) throw new Error(`The preview answered ${response.status}.`)
  return uploadPreview.parse(await response.json())
}

const DATE_WORDS = {
  ymd: 'Year, month, day',
  dmy: 'Day, month, year',
  mdy: 'Month, day, year',
  'epoch s': 'Seconds since 1970',
  'epoch ms': 'Milliseconds since 1970',
} as const

type PreviewFormProps = {
  uploadId: string
  /** How the file seems to be written. */
  guess: UploadPreview
  timeZone: string
  sensorName: string
}

/** How a file is to be read, beside its first rows as they are read that way. */
export function PreviewForm({ uploadId, guess, timeZone, sensorName }: PreviewFormProps) {
  const [changed, setChanged] = useState<UploadSettings | null>(null)
  const checked = changed === null ? null : uploadSettings.safeParse(changed)
  const asked = checked?.success ? checked.data : null
  const query = useQuery({
    queryKey: ['upload preview', uploadId, asked],
    queryFn: () => (asked === null ? guess : fetchPreview(uploadId, asked)),
    placeholderData: keepPreviousData,
    staleTime: Infinity,
    // What was typed is no settings for a moment: the rows before it stay to be seen.
    enabled: checked === null || checked.success,
  })
  const settings = changed ?? guess.settings
  const form = useKeptForm(() => importUploadAction(uploadId, settings))
  const preview = query.data ?? guess
  const errors = checked && !checked.success ? fieldErrors(checked.error) : form.state.status === 'invalid' ? form.state.fields : {}
  const change = (part: Partial<UploadSettings>) => setChanged({ ...settings, ...part })
  const isOpen = settings.dateForm === null
  const isReady = !isOpen && preview.good > 0 && Object.keys(errors).length === 0 && !query.isPlaceholderData && !query.isError
  return (
    <form {...form.formProps} className="upload-settings">
      <section className="plate">
        <header>
          <h2>How it is written</h2>
          <p>a guess from the file; correct what is wrong, and the rows below follow</p>
        </header>
        <div className="plate-body">
          <SettingsFields settings={settings} preview={preview} errors={errors} change={change} timeZone={timeZone} />
        </div>
      </section>
      <section className="plate" aria-label="The first rows as they are read" aria-busy={query.isFetching}>
        <header>
          <h2>The first rows</h2>
          <p>times in {timeZone}</p>
        </header>
        <div className="plate-body">
          {query.isError ? (
            <p className="field-error" role="status">
              <Icon name="warning" />
              <span>No answer from the server: these rows are read as before. Change something, or load the page again.</span>
            </p>
          ) : (
            <Verdict preview={preview} isOpen={isOpen} timeZone={timeZone} />
          )}
        </div>
        <PreviewRows preview={preview} settings={settings} timeZone={timeZone} />
      </section>
      <div className="form-foot">
        <Key type="submit" tone="go" isOff={form.isPending || !isReady}>
          {form.isPending ? 'Handing over' : `Read it for ${sensorName}`}
        </Key>
        {isOpen && <p className="upload-open">Say first how the dates are written.</p>}
        <FormMessage state={form.state} isLongForm />
      </div>
    </form>
  )
}

/** How many of the rows that were looked at are good, and what is wrong with the others. */
function Verdict({ preview, isOpen, timeZone }: { preview: UploadPreview; isOpen: boolean; timeZone: string }) {
  const { looked, good, from, to, reasons } = preview
  const day = (at: number) => `${formatDateOfYear(at, timeZone)} ${formatClock(at, timeZone)}`
  if (isOpen && preview.dates === 'ambiguous') {
    return (
      <p className="field-error" role="status">
        <Icon name="warning" />
        <span>The dates can be read in two ways: in all that were looked at, day and month could be either. Say which comes first.</span>
      </p>
    )
  }
  return (
    <div className="upload-verdict" role="status">
      <p className={good === looked && looked > 0 ? 'state-verdigris' : good === 0 ? 'state-furnace' : ''}>
        <Icon name={good === looked && looked > 0 ? 'check' : 'warning'} />{' '}
        <b>
          {countText(good)} of {countText(looked)} rows looked at are good
        </b>
        {from !== null && to !== null && `, from ${day(from)} to ${day(to)}`}.
      </p>
      {reasons.length > 0 && (
        <ul>
          {reasons.map(({ reason, count }) => (
            <li key={reason}>
              {countText(count)} {count === 1 ? 'row' : 'rows'}: {reason}
            </li>
          ))}
        </ul>
      )}
    </div>
  )
}

type FieldsProps = {
  settings: UploadSettings
  preview: UploadPreview
  errors: Partial<Record<string, string>>
  change: (part: Partial<UploadSettings>) => void
  timeZone: string
}

function SettingsFields({ settings, preview, errors, change, timeZone }: FieldsProps) {
  const units = useUnits()
  const { columns } = preview
  // A column that the rows do not have stays to be seen, and to be corrected.
  const count = Math.max(columns.length, settings.tempColumn + 1, settings.humidityColumn + 1, settings.dateColumn + 1)
  const columnOptions = Array.from({ length: count }, (_, index) => (
    <option key={index} value={index}>
      {columnWords(index, columns[index])}
    </option>
  ))
  const none = (
    <option value="" key="none">
      None
    </option>
  )
  const isEpoch = settings.dateForm?.startsWith('epoch') ?? false
  return (
    <div className="upload-fields">
      <SelectField
        label="Between the columns"
        value={settings.delimiter}
        error={errors['delimiter']}
        onChange={(event) => change({ delimiter: oneOf(DELIMITERS, event.target.value) })}
      >
        <option value=",">Comma</option>
        <option value=";">Semicolon</option>
        <option value={'\t'}>Tab</option>
      </SelectField>
      <SelectField
        label="Decimals"
        value={settings.hasDecimalComma ? 'comma' : 'point'}
        onChange={(event) => change({ hasDecimalComma: event.target.value === 'comma' })}
      >
        <option value="point">Point: 21.4</option>
        <option value="comma">Comma: 21,4</option>
      </SelectField>
      <LinesBefore value={settings.linesBefore} error={errors['linesBefore']} onChange={(linesBefore) => change({ linesBefore })} />
      <SelectField
        label="Letters"
        value={settings.encoding}
        error={errors['encoding']}
        onChange={(event) => change({ encoding: oneOf(ENCODINGS, event.target.value) })}
      >
        <option value="utf-8">UTF-8</option>
        <option value="utf-16le">UTF-16</option>
        <option value="latin1">Latin-1 (older Windows)</option>
      </SelectField>

      <SelectField
        label={settings.clockColumn === null ? 'Time' : 'Date'}
        value={settings.dateColumn}
        error={errors['dateColumn']}
        onChange={(event) => change({ dateColumn: Number(event.target.value) })}
      >
        {columnOptions}
      </SelectField>
      <SelectField
        label="Clock, where it stands apart"
        value={settings.clockColumn ?? ''}
        error={errors['clockColumn']}
        onChange={(event) => change({ clockColumn: toColumn(event.target.value) })}
      >
        {none}
        {columnOptions}
      </SelectField>
      <SelectField
        label="Dates"
        value={settings.dateForm ?? ''}
        error={
          settings.dateForm === null
            ? preview.dates === 'ambiguous'
              ? 'Day or month first? The file does not tell.'
              : 'Choose how the dates are written.'
            : errors['dateForm']
        }
        onChange={(event) => change({ dateForm: oneOf(DATE_FORMS, event.target.value) })}
      >
        <option value="" disabled>
          Choose
        </option>
        {Object.entries(DATE_WORDS).map(([form, words]) => (
          <option key={form} value={form}>
            {words}
          </option>
        ))}
      </SelectField>
      <SelectField
        label="Time zone"
        value={settings.zone}
        error={errors['zone']}
        hint={settings.zone === 'foundry' && !isEpoch ? 'Summer time is taken into account.' : undefined}
        onChange={(event) => change({ zone: event.target.value })}
      >
        <option value="foundry">The foundry’s: {timeZone}</option>
        <option value="UTC">UTC</option>
        <option value="rows">As each row says</option>
        <optgroup label="Fixed, without summer time">
          {FIXED_OFFSETS.map((offset) => (
            <option key={offset} value={offset}>
              UTC{offset}
            </option>
          ))}
        </optgroup>
      </SelectField>

      <SelectField
        label="Temperature"
        value={settings.tempColumn}
        error={errors['tempColumn']}
        onChange={(event) => change({ tempColumn: Number(event.target.value) })}
      >
        {columnOptions}
      </SelectField>
      <SelectField
        label="Its unit"
        value={settings.tempUnit}
        error={errors['tempUnit']}
        hint={units.temp === settings.tempUnit ? undefined : `Shown below in ${UNIT_SIGNS[units.temp]}, as you read it.`}
        onChange={(event) => change({ tempUnit: oneOf(TEMP_UNITS, event.target.value) })}
      >
        <option value="degC">{UNIT_SIGNS.degC}</option>
        <option value="degF">{UNIT_SIGNS.degF}</option>
      </SelectField>
      <SelectField
        label="Humidity, % RH"
        value={settings.humidityColumn}
        error={errors['humidityColumn']}
        onChange={(event) => change({ humidityColumn: Number(event.target.value) })}
      >
        {columnOptions}
      </SelectField>
      <SelectField
        label="Air pressure, if it is there"
        value={settings.pressureColumn === null ? '' : `${settings.pressureColumn} ${settings.pressureUnit}`}
        error={errors['pressureColumn']}
        hint="Measured there, not reduced to sea level."
        onChange={(event) => {
          const [column = '', unit] = event.target.value.split(' ')
          change({ pressureColumn: toColumn(column), ...(unit && { pressureUnit: unit === 'Pa' ? 'Pa' : 'hPa' }) })
        }}
      >
        {none}
        {Array.from({ length: count }, (_, index) =>
          (['hPa', 'Pa'] as const).map((unit) => (
            <option key={`${index} ${unit}`} value={`${index} ${unit}`}>
              {columnWords(index, columns[index])}, in {unit}
            </option>
          )),
        )}
      </SelectField>
    </div>
  )
}

const toColumn = (value: string) => (value === '' ? null : Number(value))

/** The chosen one of a list; its first where the browser names none of them. */
const oneOf = <Word extends string>(words: readonly [Word, ...Word[]], chosen: string): Word =>
  words.find((word) => word === chosen) ?? words[0]

function columnWords(index: number, column: UploadPreview['columns'][number] | undefined): string {
  if (column === undefined) return `Column ${index + 1}: not in the file`
  return `${index + 1}: ${column.name || column.samples[0] || 'empty'}`
}

/** Typed, so it may be no number for a moment; the rows follow when it is one. */
function LinesBefore({ value, error, onChange }: { value: number; error: string | undefined; onChange: (value: number) => void }) {
  const [text, setText] = useState<string | null>(null)
  return (
    <Field
      label="Lines before the data"
      inputMode="numeric"
      autoComplete="off"
      maxLength={3}
      value={text ?? String(value)}
      error={error}
      hint="The names of the columns stand in the last of them."
      onChange={(event) => {
        const typed = event.target.value
        setText(typed)
        onChange(/^\d+$/.test(typed.trim()) ? Number(typed) : Number.NaN)
      }}
    />
  )
}

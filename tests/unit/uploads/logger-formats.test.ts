import { describe, expect, it } from 'vitest'
import { cellsOf } from '@/lib/server/upload-lines'
import { guessEncoding } from '@/lib/uploads/guess-encoding'
import { guessDelimiter, guessSettings } from '@/lib/uploads/guess-settings'
import { readRow, type UploadedRow } from '@/lib/uploads/read-row'
import { rowOrder } from '@/lib/uploads/row-order'
import type { UploadSettings } from '@/lib/uploads/upload-settings'

const NOW = Date.UTC(2026, 10, 1)
const LISBON = 'Europe/Lisbon'

function readFile(bytes: Uint8Array, { timeZone = LISBON, change = {} }: { timeZone?: string; change?: Partial<UploadSettings> } = {}) {
  const encoding = guessEncoding(bytes)
  const text = Buffer.from(bytes).toString(encoding === 'utf-16le' ? 'utf16le' : encoding === 'utf-8' ? 'utf8' : 'latin1')
  const lines = text.replace(/^\uFEFF/, '').split(/\r?\n/)
  const delimiter = guessDelimiter(lines)
  const cells = cellsOf(lines, delimiter).map((each) => each ?? [])
  const guess = guessSettings(cells, [], { encoding, delimiter })
  const settings = { ...guess.settings, ...change }
  const data = cells.slice(settings.linesBefore).filter((row) => row.some((cell) => cell.trim() !== ''))
  const order = rowOrder(data, { settings, timeZone, now: NOW })
  const rows: UploadedRow[] = []
  const reasons: string[] = []
  let lastAt: number | null = null
  for (const row of data) {
    const outcome = readRow(row, { settings, timeZone, order, lastAt, now: NOW })
    lastAt = outcome.row?.measuredAt ?? lastAt
    if (outcome.row && outcome.reason === null) rows.push(outcome.row)
    else reasons.push(outcome.reason ?? '')
  }
  return { ...guess, settings, rows, reasons, order }
}

const utf8 = (text: string) => Buffer.from(text, 'utf8')

/** Files as loggers write them; all invented. The first row is always 13 October 2026, 14:05 in Lisbon (13:05 UTC), 21.4 °C, 52 %. */
const FORMATS: readonly { name: string; file: Uint8Array; expected: Partial<UploadSettings>; pressurePa?: number }[] = [
  {
    name: 'ISO with Z, commas, names without units',
    file: utf8('timestamp,temperature,humidity\n2026-10-13T13:05:00Z,21.4,52\n2026-10-13T13:10:00Z,21.5,51.8\n'),
    expected: { delimiter: ',', linesBefore: 1, zone: 'rows', dateForm: 'ymd', tempColumn: 1, humidityColumn: 2, tempUnit: 'degC' },
  },
  {
    name: 'semicolons, decimal commas, dotted dates, Latin-1 degree signs',
    file: Buffer.from(
      'Datum;Uhrzeit;Temperatur [°C];rel. Feuchte [%]\r\n13.10.2026;14:05:00;21,4;52,0\r\n13.10.2026;14:10:00;21,5;51,8\r\n',
      'latin1',
    ),
    expected: {
      encoding: 'latin1',
      delimiter: ';',
      hasDecimalComma: true,
      clockColumn: 1,
      dateForm: 'dmy',
      zone: 'foundry',
      tempColumn: 2,
    },
  },
  {
    name: 'tabs, UTF-16 with its mark, a counter in front',
    file: Buffer.from(
      '\uFEFFNo.\tTime\tTemp(C)\tHumi(%RH)\r\n1\t2026/10/13 14:05\t21.4\t52.0\r\n2\t2026/10/13 14:10\t21.5\t51.8\r\n3\t2026/10/13 14:15\t21.5\t51.8\r\n',
      'utf16le',
    ),
    expected: { encoding: 'utf-16le', delimiter: '\t', dateColumn: 1, tempColumn: 2, humidityColumn: 3, dateForm: 'ymd' },
  },
  {
    name: 'American dates with am and pm, °F in the name, everything quoted',
    file: utf8('"Time","Temp (°F)","RH (%)"\r\n"10/13/2026 2:05:00 PM","70.52","52.0"\r\n"10/13/2026 2:10:00 PM","70.6","51.8"\r\n'),
    expected: { dateForm: 'mdy', tempUnit: 'degF', delimiter: ',' },
  },
  {
    name: 'a preamble, names, units, and a dew point beside the air',
    file: utf8(
      'Serial;4711\nName;Gauge by the dipping tank\n\nDate/Time;Dew point;Temperature;Humidity;Pressure\ndd/mm/yyyy hh:mm;°C;°C;%RH;hPa\n13/10/2026 14:05;11,2;21,4;52,0;1013,2\n13/10/2026 14:10;11,2;21,5;51,8;1013,2\n',
    ),
    expected: { linesBefore: 5, tempColumn: 2, humidityColumn: 3, pressureColumn: 4, pressureUnit: 'hPa', dateForm: 'dmy' },
    pressurePa: 101_320,
  },
  {
    name: 'epoch seconds without names, pascals',
    file: utf8('1791896700,21.4,52.0,101320\n1791897000,21.5,51.8,101320\n'),
    expected: { linesBefore: 0, dateForm: 'epoch s', tempColumn: 1, humidityColumn: 2 },
  },
  {
    name: 'epoch milliseconds, humidity first by its name',
    file: utf8('ts;rh;t\n1791896700000;52.0;21.4\n1791897000000;51.8;21.5\n'),
    expected: { dateForm: 'epoch ms', tempColumn: 2, humidityColumn: 1 },
  },
  {
    name: 'an offset in the name of the column, commas, month and day with two digits of the year',
    file: utf8(
      '"#","Date Time, GMT+02:00","Temp, °C","RH, %"\n1,10/13/26 03:05:00 PM,21.4,52\n2,10/13/26 03:10:00 PM,21.5,51.8\n3,10/13/26 03:15:00 PM,21.5,51.8\n',
    ),
    expected: { zone: '+02:00', dateForm: 'mdy', dateColumn: 1, tempColumn: 2, humidityColumn: 3 },
  },
  {
    name: 'an offset in each row, decimals of the second',
    file: utf8('when,t_in,rh_in\n2026-10-13T15:05:00.000+02:00,21.4,52\n2026-10-13T15:10:00.000+02:00,21.5,51.8\n'),
    expected: { zone: 'rows', tempColumn: 1, humidityColumn: 2 },
  },
  {
    name: 'months by name, a byte-order mark, units in the cells',
    file: utf8('\uFEFFTime,Air,Moisture\n13-Oct-2026 14:05,21.4 °C,52 %\n13-Oct-2026 14:10,21.5 °C,51.8 %\n'),
    expected: { encoding: 'utf-8', tempUnit: 'degC', tempColumn: 1, humidityColumn: 2 },
  },
  {
    name: '°F known by its values alone, the newest row first',
    file: utf8('date,clock,air,moisture\n2026-10-13,14:05,70.52,52\n2026-10-13,14:00,70.6,51.8\n2026-10-13,13:55,70.7,51\n'),
    expected: { tempUnit: 'degF', clockColumn: 1, tempColumn: 2, humidityColumn: 3 },
  },
  {
    name: 'year first with dots, a battery column, no seconds',
    file: utf8('Zeit;Batt(V);Temp.;r.F.\n2026.10.13 14:05;3,01;21,4;52\n2026.10.13 14:10;3,01;21,5;51,8\n'),
    expected: { dateForm: 'ymd', tempColumn: 2, humidityColumn: 3, hasDecimalComma: true },
  },
]

describe('files as loggers write them', () => {
  it.each(FORMATS)('$name', ({ file, expected, pressurePa }) => {
    const { settings, rows, reasons, isDateAmbiguous } = readFile(file)
    expect(settings).toMatchObject(expected)
    expect(reasons).toEqual([])
    expect(isDateAmbiguous).toBe(false)
    expect(new Date(rows[0]?.measuredAt ?? 0).toISOString()).toBe('2026-10-13T13:05:00.000Z')
    expect(rows[0]).toMatchObject({ airTempC: expect.closeTo(21.4, 6), relHumidityPct: 52 })
    expect(rows[0]?.pressurePa ?? 0).toBeCloseTo(pressurePa ?? 0, 6)
    expect(rows.length).toBeGreaterThanOrEqual(2)
  })

  it('lines of events between the rows are refused one by one, with the reason', () => {
    const { rows, reasons } = readFile(
      utf8(
        'Time,Temp,RH\n2026-10-13 14:05,21.4,52\n2026-10-13 14:07,,\n2026-10-13 14:10,21.5,--\n2026-10-13 14:15,214,50\n2026-10-13 14:20,21.5,150\nEnd of data\n2026-10-13 14:25,21.5\n2026-10-13 14:30,21.6,51\n',
      ),
    )
    expect(rows).toHaveLength(2)
    expect(reasons).toEqual([
      'No temperature in this row.',
      'No humidity in this row.',
      'Kept, and not counted: No shell room is like this: −10 to 60 °C, 0 to 105 % RH.',
      'Kept, and not counted: No shell room is like this: −10 to 60 °C, 0 to 105 % RH.',
      'The time ‘End of data’ cannot be read.',
      'This row has only 2 columns.',
    ])
  })

  it('a day and a month that could be either are left to a person', () => {
    const file = utf8('Time,Temp,RH\n03/04/2026 14:05,21.4,52\n03/04/2026 14:10,21.5,51\n')
    const { settings, isDateAmbiguous, rows, reasons } = readFile(file)
    expect([settings.dateForm, isDateAmbiguous, rows]).toEqual([null, true, []])
    expect(reasons[0]).toBe('Choose first how the dates are written.')
    const first = (dateForm: 'dmy' | 'mdy') => new Date(readFile(file, { change: { dateForm } }).rows[0]?.measuredAt ?? 0).toISOString()
    expect(first('dmy')).toBe('2026-04-03T13:05:00.000Z')
    expect(first('mdy')).toBe('2026-03-04T14:05:00.000Z')
  })

  it('one day past the twelfth anywhere in the sample settles it', () => {
    expect(readFile(utf8('Time,Temp,RH\n03/04/2026 14:05,21.4,52\n13/04/2026 14:10,21.5,51\n')).settings.dateForm).toBe('dmy')
  })

  it('rows from a logger without a clock are refused, those that lie ahead too', () => {
    const { reasons } = readFile(
      utf8('Time,Temp,RH\n2000-01-01 00:05,21.4,52\n2027-10-13 14:05,21.5,51\n2026-10-13 14:05,21.5,51\n2026-10-13 14:10,21.5,51\n'),
    )
    expect(reasons).toEqual([
      'The time ‘2000-01-01 00:05’ lies before the year 2000: the clock of the logger was not set.',
      'The time ‘2027-10-13 14:05’ lies ahead: the clock of the logger, the zone or the form of the dates is wrong.',
    ])
  })

  it('a stray quotation mark costs its own line and no other', () => {
    const lines = ['Time,Temp,RH', '2026-10-13 14:05,"21.4,52', '2026-10-13 14:10,21.5,51']
    expect(cellsOf(lines, ',')).toEqual([['Time', 'Temp', 'RH'], null, ['2026-10-13 14:10', '21.5', '51']])
  })
})

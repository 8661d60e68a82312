import { describe, expect, it } from 'vitest'
import { csvResponse, csvText } from '@/lib/server/csv'

const columns = [
  { head: 'name', value: (row: { name: string; count: number | null }) => row.name },
  { head: 'count', value: (row: { name: string; count: number | null }) => row.count },
]

describe('csvText', () => {
  // OWASP, CSV injection: a cell that begins with = + - @, tab or carriage return may run as a formula.
  it.each(['=1+1', '+1', '-1', '@SUM(A1)', '\t=1', '\r=1', '\u0000=1', '＝1'])('takes the sting out of %j', (name) => {
    const [, line = ''] = csvText(columns, [{ name, count: 1 }]).split('\r\n')
    expect(line.replace(/^"/, '')).toMatch(/^'/)
  })

  it('leaves numbers numbers, also below zero, and an unknown empty', () => {
    expect(csvText(columns, [{ name: 'a', count: -12.5 }])).toBe('name,count\r\na,-12.5\r\n')
    expect(csvText(columns, [{ name: 'a', count: null }])).toBe('name,count\r\na,\r\n')
  })

  it('quotes what would break a line', () => {
    expect(csvText(columns, [{ name: 'Otter, "Gate"\n2', count: 1 }], false)).toBe('"Otter, ""Gate""\n2",1\r\n')
  })
})

describe('csvResponse', () => {
  it('sends the head once, and also when there is no row', async () => {
    const parts = [[{ name: 'a', count: 1 }], [{ name: 'b', count: 2 }], []]
    expect(await csvResponse('x.csv', columns, async (index) => parts[index] ?? []).text()).toBe('name,count\r\na,1\r\nb,2\r\n')
    expect(await csvResponse('x.csv', columns, async () => []).text()).toBe('name,count\r\n')
  })
})

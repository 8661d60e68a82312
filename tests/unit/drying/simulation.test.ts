import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { beforeAll, describe, expect, it } from 'vitest'
import { figuresOf, simulateFoundry, type Way } from '@/tests/factories/clock-simulation'

const FOUNDRIES = 30

/** The rows of the table in README, by their first words. */
const ROWS: Record<Way, string> = {
  timer: 'A timer of 4 hours',
  'timer by experience': 'A timer set to what the first half took',
  untrained: 'The clock as it comes, at the dip',
  'with evidence': 'The clock as it comes, after two looks at the coat',
  'after learning': 'After the first half has taught the recipe, at the dip',
  'after learning, with evidence': 'After the first half has taught the recipe, after two looks',
}

let figures: ReturnType<typeof figuresOf>
beforeAll(() => {
  figures = figuresOf(Array.from({ length: FOUNDRIES }, (_, index) => simulateFoundry(index + 1)))
}, 300_000)

describe('the clock in simulated foundries of fifty shells', () => {
  it('is nearer than a timer before anything is known, nearer still with evidence and with what it has learned', () => {
    const off = (way: Way) => figures[way].medianErrorMinutes
    expect(off('untrained')).toBeLessThan(0.75 * off('timer'))
    expect(off('untrained')).toBeLessThan(0.95 * off('timer by experience'))
    expect(off('with evidence')).toBeLessThan(0.5 * off('untrained'))
    expect(off('after learning')).toBeLessThan(0.8 * off('untrained'))
    expect(off('after learning, with evidence')).toBeLessThan(0.95 * off('with evidence'))
  })

  it.each(['untrained', 'with evidence', 'after learning', 'after learning, with evidence'] as const)(
    'has 70 to 90 of a hundred coats dry between the earliest and the safe time: %s',
    (way) => {
      expect(figures[way].insidePct).toBeGreaterThan(70)
      expect(figures[way].insidePct).toBeLessThan(90)
    },
  )

  // One more or less: another processor may round the last bit of a sine otherwise.
  it.each(Object.keys(ROWS) as Way[])('stands in README with the figures of this run: %s', (way) => {
    const readme = readFileSync(join(import.meta.dirname, '../../../README.md'), 'utf8')
    const cells = readme
      .split('\n')
      .find((line) => line.startsWith(`| ${ROWS[way]} |`))
      ?.split('|')
      .map((cell) => cell.trim())
    const { medianErrorMinutes, insidePct } = figures[way]
    expect(cells, `| ${ROWS[way]} | ${medianErrorMinutes.toFixed(0)} min | ${insidePct.toFixed(0)} % |`).toBeDefined()
    expect(Math.abs(Number(cells?.[2]?.replace(' min', '')) - medianErrorMinutes), String(medianErrorMinutes)).toBeLessThanOrEqual(1)
    const isTimer = way.startsWith('timer')
    const isShareRight = isTimer ? cells?.[3] === '' : Math.abs(Number(cells?.[3]?.replace(' %', '')) - insidePct) <= 1
    expect(isShareRight, String(insidePct)).toBe(true)
  })
})

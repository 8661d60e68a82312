import { readFile } from 'node:fs/promises'
import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { LAPTOP, launchBrowser, newDevice, PHONE, signInOn } from '@/tests/setup/browser'
import { seedMember, startServer, startWorker, type Program, type TestServer } from '@/tests/setup/server'

let server: TestServer
let worker: Program
let browser: Browser
let page: Page
let errors: string[]
let sensorId: number

/** Day and month could be either. */
const DAY = '03/04/2026'

/** With two lines that are no readings. */
const FILE = [
  'Day;Clock;Temp;Humidity;Note',
  ...Array.from({ length: 24 }, (_, hour) => {
    const clock = `${String(hour).padStart(2, '0')}:00`
    const temp = hour === 5 ? 'open' : `21,${hour % 10}`
    return `${DAY};${clock};${temp};5${hour % 10},0;by the tank`
  }),
  'End of data',
].join('\r\n')

beforeAll(async () => {
  server = await startServer()
  const supervisor = await seedMember('supervisor')
  const { buildFoundry } = await import('@/tests/factories/shell-room')
  ;({ sensorId } = await buildFoundry())
  worker = startWorker(server.dataDir)
  browser = await launchBrowser()
  ;({ page, errors } = await newDevice(browser, server.baseUrl, { size: LAPTOP, hasTouch: false }))
  await signInOn(page, supervisor)
})
afterAll(async () => {
  await browser.close()
  await worker.stop()
  await server.stop()
})

const readKey = () => page.getByRole('button', { name: /^Read it for/ })

describe('a file of readings', () => {
  it('is brought, corrected, read and followed to the climate', async () => {
    await page.goto('/room')
    await page.getByText('Sensors', { exact: true }).click()
    await page.getByRole('link', { name: 'Readings from a file' }).click()
    await page.waitForURL('**/room/upload?sensor=*')
    await page.getByRole('button', { name: 'Look at the file' }).click()
    await page.getByText('Choose a file.').waitFor()
    await page.getByLabel('File', { exact: true }).setInputFiles({ name: 'tank.csv', mimeType: 'text/csv', buffer: Buffer.from(FILE) })
    await page.getByRole('button', { name: 'Look at the file' }).click()
    await page.waitForURL(/\/room\/upload\/[\da-f-]{36}$/)

    // The file cannot tell day from month, and the person has to.
    await page.getByText('The dates can be read in two ways').waitFor()
    expect(await readKey().getAttribute('aria-disabled')).toBe('true')
    await page.getByLabel('Dates').selectOption('dmy')
    await page.getByText('23 of 25 rows looked at are good').waitFor()
    await page.getByText('Fri 3 Apr 2026').first().waitFor()

    // A wrong delimiter is seen at once in the rows, and put right.
    await page.getByLabel('Between the columns').selectOption(',')
    await page.getByText('0 of 25 rows looked at are good').waitFor()
    await page.getByLabel('Between the columns').selectOption(';')
    await page.getByText('23 of 25 rows looked at are good').waitFor()
    await page.getByLabel('Time zone').selectOption('UTC')
    await expect.poll(() => readKey().getAttribute('aria-disabled')).toBeNull()
    await readKey().click()

    const [download] = await Promise.all([
      page.waitForEvent('download'),
      page.getByRole('link', { name: 'Rows that were not read' }).click(),
    ])
    const [head, ...lines] = (await readFile(await download.path(), 'utf8')).trim().split('\r\n')
    expect(head).toBe('line,reason,as it stands in the file')
    expect(lines).toEqual([
      `7,The temperature ‘open’ is no number.,${DAY},05:00,open,"55,0",by the tank`,
      '26,The time ‘End of data’ cannot be read.,End of data',
    ])
    const { Reading, DoseHour } = await import('@/models')
    expect(await Reading.count({ where: { sensorId } })).toBe(23)
    expect(await Reading.findOne({ where: { sensorId, measuredAt: Date.UTC(2026, 3, 3, 12) } })).toMatchObject({ airTempC: 21.2 })
    expect(await DoseHour.count({ where: { sensorId } })).toBeGreaterThanOrEqual(23)
    const climate = await page.request.get(`/api/v1/rooms/${sensorId}/climate.csv?from=2026-04-03&to=2026-04-03`)
    expect(await climate.text()).toContain('21.2')
    expect(errors).toEqual([])
  })

  it('stands in the list, and fits a phone', async () => {
    await page.setViewportSize(PHONE)
    await page.getByRole('link', { name: 'All files' }).click()
    await page.getByRole('link', { name: 'tank.csv' }).waitFor()
    await expect.poll(() => page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(PHONE.width)
    expect(errors).toEqual([])
  })
})

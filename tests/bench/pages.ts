import type { Browser } from 'playwright-core'
import { z } from 'zod'

export type PageCost = { scriptBytes: number; firstPaintMs: number }

const paint = z.number()

/** What one page costs a browser that has never been there: bytes of script over the wire, and the time to its first words. */
export async function pageCost(browser: Browser, url: string, cookies: ReadonlyMap<string, string>): Promise<PageCost> {
  const context = await browser.newContext({ viewport: { width: 1280, height: 800 } })
  await context.addCookies([...cookies].map(([name, value]) => ({ name, value, url })))
  const page = await context.newPage()
  const network = await context.newCDPSession(page)
  await network.send('Network.enable')
  const scripts = new Set<string>()
  let scriptBytes = 0
  network.on('Network.responseReceived', ({ requestId, type }) => {
    if (type === 'Script') scripts.add(requestId)
  })
  network.on('Network.loadingFinished', ({ requestId, encodedDataLength }) => {
    if (scripts.has(requestId)) scriptBytes += encodedDataLength
  })
  await page.goto(url, { waitUntil: 'load' })
  await page.waitForTimeout(1500)
  const firstPaintMs = paint.parse(await page.evaluate(() => performance.getEntriesByName('first-contentful-paint')[0]?.startTime))
  await context.close()
  return { scriptBytes, firstPaintMs }
}

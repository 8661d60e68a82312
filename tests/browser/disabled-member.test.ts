import type { Browser } from 'playwright-core'
import { afterAll, beforeAll, expect, it } from 'vitest'
import type { Role } from '@/lib/members/roles'
import { LAPTOP, launchBrowser, newDevice, open, PHONE, signInOn } from '@/tests/setup/browser'
import { seedMembers, startServer, type SeededMember, type TestServer } from '@/tests/setup/server'

const SENTENCE = 'You are signed out here: the session has ended.'

let server: TestServer
let browser: Browser
let members: Record<Role, SeededMember>

beforeAll(async () => {
  server = await startServer()
  members = await seedMembers()
  const { buildFoundry, buildRecipe, buildTree } = await import('@/tests/factories/shell-room')
  const foundry = await buildFoundry()
  await buildTree(foundry, { recipeVersionId: await buildRecipe(foundry) })
  browser = await launchBrowser()
})
afterAll(async () => {
  await browser.close()
  await server.stop()
})

it('a member who is disabled while they work is led to the sign-in page, with a sentence', async () => {
  const tablet = await newDevice(browser, server.baseUrl)
  await signInOn(tablet.page, members.operator)
  await tablet.page.getByRole('heading', { name: 'Floor of Test foundry' }).waitFor({ state: 'attached' })
  const phone = await newDevice(browser, server.baseUrl, { size: PHONE })
  await signInOn(phone.page, members.operator)
  await open(phone.page, '/trees')

  const desk = await newDevice(browser, server.baseUrl, { size: LAPTOP, hasTouch: false })
  await signInOn(desk.page, members.owner)
  await open(desk.page, '/people')
  await desk.page.getByRole('link', { name: members.operator.name }).click()
  const key = desk.page.getByRole('button', { name: 'Disable, hold the key' })
  await key.hover()
  await desk.page.mouse.down()
  await desk.page.getByText('Disabled, and signed out everywhere.').waitFor()
  await desk.page.mouse.up()

  // The floor asks every three seconds; the office page at the next touch.
  await tablet.page.waitForURL('**/sign-in?*', { timeout: 15_000 })
  await tablet.page.getByText(SENTENCE).waitFor()
  await phone.page.getByRole('link', { name: 'Burnout' }).tap()
  await phone.page.waitForURL('**/sign-in?*')
  await phone.page.getByText(SENTENCE).waitFor()

  // Whether the password was right is not said.
  await tablet.page.getByLabel('E-mail').fill(members.operator.email)
  await tablet.page.getByLabel('Password').fill(members.operator.password)
  await tablet.page.getByRole('button', { name: 'Sign in' }).tap()
  await tablet.page.getByText('E-mail or password is not right.').waitFor()
  expect(await tablet.page.getByText(SENTENCE).count()).toBe(0)

  await desk.page.getByRole('button', { name: 'Enable' }).click()
  await desk.page.getByText('Enabled: they sign in with the password they had.').waitFor()
  await signInOn(tablet.page, members.operator)
  expect(desk.errors).toEqual([])
})

it('a new member comes in with the first password, makes their own, and reads in their own units', async () => {
  const desk = await newDevice(browser, server.baseUrl, { size: LAPTOP, hasTouch: false })
  await signInOn(desk.page, members.owner)
  await open(desk.page, '/people')
  await desk.page.getByLabel('Name').fill('Nell Ware')
  await desk.page.getByLabel('E-mail').fill('nell@kilnward.example')
  await desk.page.getByRole('button', { name: 'Add the member' }).click()
  await desk.page.getByText('Choose what they may do.').waitFor()
  expect(await desk.page.getByLabel('Name').inputValue()).toBe('Nell Ware')
  await desk.page.getByRole('radio', { name: /operator/ }).check()
  await desk.page.getByRole('button', { name: 'Add the member' }).click()
  const firstPassword = (await desk.page.locator('.first-password-word').textContent()) ?? ''
  await desk.page.getByRole('link', { name: 'Nell Ware' }).waitFor()
  expect(await desk.page.getByLabel('Name').inputValue()).toBe('')

  const phone = await newDevice(browser, server.baseUrl, { size: PHONE })
  const { page } = phone
  await open(page, '/sign-in')
  await page.getByLabel('E-mail').fill('nell@kilnward.example')
  await page.getByLabel('Password').fill(firstPassword)
  await page.getByRole('button', { name: 'Sign in' }).tap()
  await page.waitForURL('**/me/password')
  await open(page, '/trees')
  await page.waitForURL('**/me/password')
  await page.getByLabel('The first password, once more').fill(firstPassword)
  await page.getByLabel('Your new password').fill('password1234')
  await page.getByRole('button', { name: 'Save the new password' }).tap()
  await page.getByText('This is one of the first passwords that anybody would try.').waitFor()
  expect(await page.getByLabel('The first password, once more').inputValue()).toBe(firstPassword)
  await page.getByLabel('Your new password').fill('heron on the weir at six')
  await page.getByRole('button', { name: 'Save the new password' }).tap()
  await page.waitForURL('**/floor')

  await open(page, '/me')
  await page.getByLabel('Temperature').selectOption('degF')
  await page.getByRole('button', { name: 'Save the units' }).tap()
  await page.getByText('Saved: every page shows them now.').waitFor()
  await open(page, '/floor')
  await page.getByRole('heading', { name: 'Floor of Test foundry' }).waitFor({ state: 'attached' })
  expect(await page.locator('.strip-room').textContent()).toContain('°F')
  // The same floor stays in °C for everybody else.
  await open(desk.page, '/floor')
  expect(await desk.page.locator('.strip-room').textContent()).toContain('°C')
  expect([...desk.errors, ...phone.errors]).toEqual([])
})

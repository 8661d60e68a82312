import type { Browser } from 'playwright-core'
import { afterAll, beforeAll, expect, it } from 'vitest'
import type { Role } from '@/lib/members/roles'
import { LAPTOP, launchBrowser, newDevice, signInOn } from '@/tests/setup/browser'
import { seedMembers, startServer, type SeededMember, type TestServer } from '@/tests/setup/server'

let server: TestServer
let browser: Browser
let members: Record<Role, SeededMember>

beforeAll(async () => {
  server = await startServer()
  members = await seedMembers()
  browser = await launchBrowser()
})
afterAll(async () => {
  await browser.close()
  await server.stop()
})

it('says what will stand there, then takes over what finished coats say of a recipe, and goes back', async () => {
  const { buildFoundry, buildRecipe, buildTree, NOW } = await import('@/tests/factories/shell-room')
  const { buildFinishedCoats } = await import('@/tests/factories/finished-coats')
  const { Coat, Member, Recipe, RecipeCoat, RecipeVersion, Tree } = await import('@/models')
  const foundry = await buildFoundry()
  const versionId = await buildRecipe(foundry)
  const { recipeId } = await RecipeVersion.findByPk(versionId, { rejectOnEmpty: true })
  await Recipe.update({ name: 'Four coats, small work' }, { where: { id: recipeId } })

  const { page, errors } = await newDevice(browser, server.baseUrl, { size: LAPTOP, hasTouch: false })
  await signInOn(page, members.supervisor)
  await page.goto('/calibration')
  await page.getByRole('heading', { name: 'No finished coat tells anything yet' }).waitFor()

  const open = await buildTree(foundry, { recipeVersionId: versionId })
  const { id: memberId } = await Member.findOne({ where: { role: 'operator' }, rejectOnEmpty: true })
  await buildFinishedCoats({ foundry, memberId, recipeVersionId: versionId, count: 12 }, { number: 2, theta: 0.2 })
  // The page reads the newest two years by the machine's own clock.
  const shift = Date.now() - NOW
  for (const coat of await Coat.findAll()) {
    const moved = (at: number | null) => (at === null ? null : at + shift)
    await coat.update({
      dippedAt: coat.dippedAt + shift,
      coveredAt: moved(coat.coveredAt),
      forecastP10At: moved(coat.forecastP10At),
      forecastP50At: moved(coat.forecastP50At),
      forecastP90At: moved(coat.forecastP90At),
      outcomeDryAt: moved(coat.outcomeDryAt),
    })
  }
  await page.reload()
  await page.getByText('Of 12 coats that were checked, 12 (100 %) came dry between P10 and P90').waitFor()
  const plate = page.getByRole('region', { name: 'Four coats, small work' })
  await plate.getByText('asks for a change').waitFor()
  await plate.getByLabel(/open trees? of this recipe along/).check()
  await plate.getByRole('button', { name: 'Make version 2 with 1 coat' }).click()
  await plate.getByText(/Version 2 is made\. 13 trees moved to it\./).waitFor()

  const needOf = async (version: number) => {
    const made = await RecipeVersion.findOne({ where: { recipeId, version }, rejectOnEmpty: true })
    const coat = await RecipeCoat.findOne({ where: { recipeVersionId: made.id, number: 2 }, rejectOnEmpty: true })
    return { id: made.id, need: coat.needReferenceHours, by: coat.calibratedByCoats }
  }
  const second = await needOf(2)
  expect(second).toMatchObject({ by: 12 })
  expect(second.need).toBeGreaterThan(4.5)
  expect((await Tree.findByPk(open.id))?.recipeVersionId).toBe(second.id)

  await page.goto(`/recipes/${recipeId}`)
  await page.getByText('1 of 4 coats calibrated').first().waitFor()
  await page.getByText('by 12 coats', { exact: true }).waitFor()
  await page.getByRole('link', { name: 'Calibration' }).last().click()
  await page.getByRole('button', { name: 'Go back: Four coats, small work, coat 2' }).click()
  await plate.getByText('version 3, the newest').waitFor()
  expect(await needOf(3)).toMatchObject({ need: 4, by: null })
  expect(errors).toEqual([])
})

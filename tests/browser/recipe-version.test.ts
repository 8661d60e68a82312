import type { Browser } from 'playwright-core'
import { afterAll, beforeAll, expect, it } from 'vitest'
import type { Role } from '@/lib/members/roles'
import { LAPTOP, launchBrowser, newDevice, open, signInOn } from '@/tests/setup/browser'
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

it('makes a new version of a recipe, sees what differs, and moves a tree to it', async () => {
  const { buildFoundry, buildRecipe, buildTree } = await import('@/tests/factories/shell-room')
  const { Recipe, RecipeVersion, Tree } = await import('@/models')
  const foundry = await buildFoundry()
  const versionId = await buildRecipe(foundry)
  const tree = await buildTree(foundry, { recipeVersionId: versionId })
  const { recipeId } = await RecipeVersion.findByPk(versionId, { rejectOnEmpty: true })
  await Recipe.update({ name: 'Four coats, small work' }, { where: { id: recipeId } })

  const { page, errors } = await newDevice(browser, server.baseUrl, { size: LAPTOP, hasTouch: false })
  await signInOn(page, members.supervisor)
  await open(page, '/recipes')
  await page.getByRole('link', { name: 'Four coats, small work' }).click()
  await page.getByRole('heading', { name: 'Four coats, small work' }).waitFor()
  await page.getByText('not calibrated yet').first().waitFor()
  await page.getByRole('link', { name: 'New version' }).click()

  // Nothing typed, nothing differs; a value out of its range is said beside its coat and nothing is lost.
  await page.getByText('Nothing differs from version 1.').waitFor()
  const coat = (number: number) => page.getByRole('group', { name: `Coat ${number}`, exact: true })
  await coat(2).getByLabel('Need, h').fill('450')
  await page.getByRole('button', { name: 'Add a coat' }).click()
  await page.getByLabel('Why there is a new version').fill('Edges broke through.')
  await page.getByRole('button', { name: 'Save version 2' }).click()
  await coat(2).getByText('The need is at most 200 reference hours.').waitFor()
  expect(await page.getByLabel('Why there is a new version').inputValue()).toBe('Edges broke through.')

  await coat(2).getByLabel('Need, h').fill('4,5')
  const differences = page.getByRole('list', { name: 'Differences from version 1' })
  await differences.getByText(/need 4\.5\s*h, was 4\s*h/).waitFor()
  // Put in under the seal, like the coat below it.
  await differences.getByText(/Coat 4: backup, coarse/).waitFor()
  await coat(5).getByLabel('Kind').waitFor()
  expect(await coat(5).getByLabel('Kind').inputValue()).toBe('seal')
  await page.getByRole('button', { name: 'Save version 2' }).click()

  await page.waitForURL(`**/recipes/${recipeId}`)
  await page.getByText('Version 2, the newest').waitFor()
  await page.getByText('was 4', { exact: true }).first().waitFor()
  await page.getByLabel(new RegExp(tree.tag)).check()
  await page.getByRole('button', { name: 'Move 1 to version 2' }).click()
  await expect.poll(async () => (await Tree.findByPk(tree.id))?.recipeVersionId).not.toBe(versionId)
  await page.getByText(`${tree.tag} moved to version 2.`).waitFor()
  await page.getByText('No open tree stands on an older version.').waitFor()

  await page.getByRole('link', { name: tree.tag }).click()
  await page.getByRole('heading', { name: 'Coat log' }).waitFor()
  expect(await page.locator('.coat-log th[scope="row"]').allTextContents()).toEqual(['5', '4', '3', '2', '1'])
  await page.getByText('Moved from version 1 to version 2 of Four coats, small work, from coat 1 on.').waitFor()
  expect(errors).toEqual([])
})

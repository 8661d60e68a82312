import { describe, expect, it } from 'vitest'
import { endFirstRun, endFirstRunStep } from '@/lib/commands/first-run'
import { makeFirstOwner } from '@/lib/commands/make-first-owner'
import { createBath } from '@/lib/commands/save-bath'
import { createPlace } from '@/lib/commands/save-place'
import { createSensor } from '@/lib/commands/save-sensor'
import { signIn } from '@/lib/commands/sign-in'
import { takeStarterRecipes } from '@/lib/commands/take-starter-recipes'
import type { Actor } from '@/lib/members/actor'
import { loadFirstRun } from '@/lib/queries/first-run'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { loadQueue } from '@/lib/queries/queue'
import { sessionMember } from '@/tests/factories/session-member'
import { loadTreeForm } from '@/lib/queries/tree-form'
import { Foundry, FoundryEvent, Member, RecipeCoat, Session } from '@/models'
import { stoppedClock } from '@/tests/factories/shell-room'

const clock = stoppedClock()
const visitor = (name: string) => ({
  name,
  email: `${name.toLowerCase()}@foundry.example`,
  password: `${name} and three foxes`,
  setupCode: '',
  timeZone: 'America/Denver',
})

// In this order: one foundry, from nothing to its floor.
describe('a first run', () => {
  let owner: Actor

  it('has nothing before it: what needs a foundry says that there is none', async () => {
    await expect(loadFoundry()).rejects.toMatchObject({ code: 'unavailable' })
    await expect(loadQueue({ clock })).rejects.toMatchObject({ code: 'unavailable' })
  })

  it('lets one of many visitors at once make the owner’s account', async () => {
    const tries = ['Ada', 'Bo', 'Cem', 'Dee', 'Eli'].map((name) =>
      makeFirstOwner(visitor(name), { userAgent: 'Firefox', clock, scryptCost: 16 }),
    )
    const outcomes = await Promise.allSettled(tries)
    const won = outcomes.filter((outcome) => outcome.status === 'fulfilled')
    expect(won).toHaveLength(1)
    const refused = outcomes.filter((outcome) => outcome.status === 'rejected')
    expect(refused.map(({ reason }: { reason: unknown }) => reason)).toEqual(
      Array.from({ length: 4 }, () => expect.objectContaining({ code: 'conflict', message: expect.stringMatching(/made already/) })),
    )
    expect(await Member.count()).toBe(1)
    expect(await Session.count()).toBe(1)
    const [member] = await Member.findAll()
    expect(member).toMatchObject({ role: 'owner', isDemo: false, disabledAt: null, firstPasswordUntil: null })
    owner = { id: member!.id, name: member!.name, role: 'owner' }
    const { email, password } = visitor(member!.name)
    expect(await signIn({ email, password, userAgent: '', device: null }, { clock })).toMatchObject({ outcome: 'signed in' })
    expect((await loadFoundry()).timeZone).toBe('America/Denver')
  })

  it('lets nobody make a second one', async () => {
    await expect(makeFirstOwner(visitor('Fia'), { userAgent: '', clock, scryptCost: 16 })).rejects.toMatchObject({ code: 'conflict' })
    await Member.update({ disabledAt: clock.now() }, { where: {} })
    await expect(makeFirstOwner(visitor('Fia'), { userAgent: '', clock, scryptCost: 16 })).rejects.toMatchObject({ code: 'conflict' })
    await Member.update({ disabledAt: null }, { where: {} })
  })

  it('signs the owner in at once, into a foundry that is not set up', async () => {
    const session = await Session.findOne({ where: { userAgent: 'Firefox' }, rejectOnEmpty: true })
    expect(await sessionMember(session.id, { clock })).toMatchObject({ role: 'owner', isFoundrySetUp: false })
  })

  it('goes on step by step, and not before what later steps need is there', async () => {
    const by = { member: owner, clock }
    const reached = async () => (await loadFirstRun()).reached
    expect(await reached()).toBe('foundry')
    await endFirstRunStep('foundry')
    // Pressed twice, or gone back to: nothing is skipped.
    await endFirstRunStep('foundry')
    expect(await reached()).toBe('hours')
    await endFirstRunStep('hours')
    await expect(endFirstRunStep('baths')).rejects.toMatchObject({ message: 'Add a face bath.' })
    await createBath({ name: 'Face slurry', kind: 'face' }, by)
    await expect(endFirstRunStep('baths')).rejects.toMatchObject({ message: 'Add a backup bath.' })
    await createBath({ name: 'Backup slurry', kind: 'backup' }, by)
    await endFirstRunStep('baths')
    await expect(endFirstRunStep('sensor')).rejects.toMatchObject({ code: 'unprocessable' })
    const { sensorId } = await createSensor({ name: 'Wall', kind: 'wall hygrometer' }, by)
    await endFirstRunStep('sensor')
    await expect(endFirstRunStep('places')).rejects.toMatchObject({ code: 'unprocessable' })
    const estimated = { airMeasuredOn: null, airMeasuredWith: null, airMeasuredBy: null }
    await createPlace({ name: 'Rack A', sensorId, airSpeedFansOnMps: 1, airSpeedFansOffMps: 0.1, fanDuty: 1, ...estimated, fans: [] }, by)
    await endFirstRunStep('places')
    expect(await reached()).toBe('recipes')
    await expect(endFirstRun(by)).rejects.toMatchObject({ code: 'unprocessable' })
  })

  it('takes starter recipes, not calibrated, the seal last, and each once', async () => {
    const by = { member: owner, clock }
    expect(await takeStarterRecipes(['small', 'heavy'], by)).toEqual(['Small shell', 'Heavy shell'])
    expect(await takeStarterRecipes(['small', 'usual'], by)).toEqual(['Usual shell'])
    const { recipes } = await loadTreeForm()
    expect(recipes.map(({ coatCount }) => coatCount).toSorted((one, other) => one - other)).toEqual([6, 8, 10])
    expect(recipes.every(({ isCalibrated }) => !isCalibrated)).toBe(true)
    for (const { versionId, coatCount } of recipes) {
      const coats = await RecipeCoat.findAll({ where: { recipeVersionId: versionId }, order: ['number'] })
      expect(coats.map(({ kind }) => kind === 'seal')).toEqual(coats.map((_, index) => index === coatCount - 1))
      expect(coats[0]).toMatchObject({ kind: 'face', needReferenceHours: 2.5, guard: 'safe' })
    }
  })

  it('ends once, with a line of history, and opens the floor', async () => {
    const by = { member: owner, clock }
    await endFirstRunStep('recipes')
    await endFirstRunStep('people')
    await endFirstRun(by)
    clock.advance(1000)
    await endFirstRun(by)
    expect(await Foundry.findByPk(1)).toMatchObject({ setUpAt: clock.now() - 1000, isDemo: false })
    const session = await Session.findOne({ where: { userAgent: 'Firefox' }, rejectOnEmpty: true })
    expect(await sessionMember(session.id, { clock })).toMatchObject({ isFoundrySetUp: true })
    const kinds = (await FoundryEvent.findAll({ order: ['id'] })).map(({ kind }) => kind)
    expect(kinds.filter((kind) => kind === 'owner made' || kind === 'foundry set up')).toEqual(['owner made', 'foundry set up'])
    expect(JSON.stringify(await FoundryEvent.findAll())).not.toContain('three foxes')
    expect((await loadQueue({ clock })).queue).toMatchObject({ trees: [], foundry: { isDemo: false, hasDemoData: false } })
  })
})

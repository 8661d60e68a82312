import { QueryTypes } from 'sequelize'
import type { BathInput } from '@/lib/coats/bath-input'
import { addFoundryEvent } from '@/lib/commands/foundry-event'
import { requireFreeName } from '@/lib/commands/require-free-name'
import { stopBeingDemo } from '@/lib/commands/stop-being-demo'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import { nameList } from '@/lib/format/name-list'
import type { Actor } from '@/lib/members/actor'
import { changedFields } from '@/lib/members/changed-fields'
import { Bath, database, inTransaction } from '@/models'

type By = { member: Actor; clock: Clock }

/** Adds a bath. @throws {AppError} conflict with `fields` for a name that is taken. */
export function createBath(input: BathInput, { member, clock }: By): Promise<{ bathId: string }> {
  return inTransaction(async () => {
    const now = clock.now()
    requireFreeName(input.name, { among: await Bath.findAll(), kind: 'bath', ownId: null })
    const bathId = newId(now)
    await Bath.create({ ...input, id: bathId, isDemo: member.isDemo ?? false, createdAt: now })
    await addFoundryEvent(
      { type: 'bath', id: bathId, name: input.name },
      { kind: 'bath added', by: member, at: now, text: `Bath ${input.name} added.`, after: input },
    )
    return { bathId }
  })
}

/** Changes a bath in use. @throws {AppError} not_found; conflict when it is retired, with `fields` for a name that is taken. */
export function changeBath(bathId: string, input: BathInput, { member, clock }: By): Promise<void> {
  return inTransaction(async () => {
    const bath = await bathInUse(bathId)
    requireFreeName(input.name, { among: await Bath.findAll(), kind: 'bath', ownId: bathId })
    const changed = changedFields({ name: bath.name, kind: bath.kind }, input)
    if (Object.keys(changed.after).length === 0) return
    await bath.update(input)
    await stopBeingDemo(bath, member)
    await addFoundryEvent(
      { type: 'bath', id: bathId, name: input.name },
      { kind: 'bath changed', by: member, at: clock.now(), text: `Bath ${input.name} changed.`, ...changed },
    )
  })
}

/**
 * Retires a bath: it leaves the floor, and coats that were dipped in it keep it in their log.
 *
 * @throws {AppError} not_found; conflict while a recipe in use, or a tree that hangs, needs it for a coat to come.
 */
export function retireBath(bathId: string, { member, clock }: By): Promise<void> {
  return inTransaction(async () => {
    const now = clock.now()
    const bath = await bathInUse(bathId)
    const recipes = await recipesThatNeed(bathId)
    if (recipes.length > 0) {
      const verb = recipes.length === 1 ? 'needs' : 'need'
      throw new AppError(
        'conflict',
        `${nameList(recipes.map((name) => `‘${name}’`))} ${verb} ${bath.name}. Make a new version without it first.`,
      )
    }
    const tags = await treesThatWait(bathId)
    if (tags.length > 0) {
      throw new AppError('conflict', `${nameList(tags)} still ${tags.length === 1 ? 'has' : 'have'} a coat to come from ${bath.name}.`)
    }
    await bath.update({ retiredAt: now })
    await stopBeingDemo(bath, member)
    await addFoundryEvent(
      { type: 'bath', id: bathId, name: bath.name },
      { kind: 'bath retired', by: member, at: now, text: `Bath ${bath.name} retired.` },
    )
  })
}

/** Takes a retired bath into use again. @throws {AppError} not_found. Without effect when it is in use. */
export function reuseBath(bathId: string, { member, clock }: By): Promise<void> {
  return inTransaction(async () => {
    const bath = await Bath.findByPk(bathId)
    if (!bath) throw new AppError('not_found', 'There is no such bath.')
    if (bath.retiredAt === null) return
    await bath.update({ retiredAt: null })
    await stopBeingDemo(bath, member)
    await addFoundryEvent(
      { type: 'bath', id: bathId, name: bath.name },
      { kind: 'bath in use again', by: member, at: clock.now(), text: `Bath ${bath.name} taken into use again.` },
    )
  })
}

async function bathInUse(bathId: string): Promise<Bath> {
  const bath = await Bath.findByPk(bathId)
  if (!bath) throw new AppError('not_found', 'There is no such bath.')
  if (bath.retiredAt !== null) throw new AppError('conflict', `${bath.name} is retired.`)
  return bath
}

async function recipesThatNeed(bathId: string): Promise<string[]> {
  const rows = await database.query<{ name: string }>(
    `SELECT r.name FROM recipes r JOIN recipe_versions v ON v.recipe_id = r.id
      WHERE r.retired_at IS NULL AND v.version = (SELECT max(version) FROM recipe_versions WHERE recipe_id = r.id)
        AND EXISTS (SELECT 1 FROM recipe_coats c WHERE c.recipe_version_id = v.id AND c.bath_id = :bathId) ORDER BY r.name`,
    { type: QueryTypes.SELECT, replacements: { bathId } },
  )
  return rows.map(({ name }) => name)
}

/** A tree keeps the version it was begun with, so an older one can still need the bath. */
async function treesThatWait(bathId: string): Promise<string[]> {
  const rows = await database.query<{ tag: string }>(
    `SELECT t.tag FROM trees t WHERE t.released_at IS NULL AND t.scrapped_at IS NULL AND EXISTS (
       SELECT 1 FROM recipe_coats c WHERE c.recipe_version_id = t.recipe_version_id AND c.bath_id = :bathId
          AND c.number > (SELECT count(*) FROM coats WHERE tree_id = t.id AND withdrawn_at IS NULL)) ORDER BY t.tag`,
    { type: QueryTypes.SELECT, replacements: { bathId } },
  )
  return rows.map(({ tag }) => tag)
}

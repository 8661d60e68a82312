import { addFoundryEvent } from '@/lib/commands/foundry-event'
import { refuseField } from '@/lib/commands/refuse-field'
import { stopBeingDemo } from '@/lib/commands/stop-being-demo'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import { isSameName } from '@/lib/format/same-name'
import type { Actor } from '@/lib/members/actor'
import { changedFields } from '@/lib/members/changed-fields'
import type { WorkInput } from '@/lib/works/work-input'
import { inTransaction, Piece, Section, Work } from '@/models'

type By = { member: Actor; clock: Clock }

/**
 * Changes a work's title and the size of its edition.
 *
 * @throws {AppError} not_found; conflict with `fields` when the title is taken or a higher edition was cast already.
 */
export function editWork(workId: string, input: WorkInput, { member, clock }: By): Promise<void> {
  return inTransaction(async () => {
    const work = await findWork(workId)
    const { before, after } = changedFields({ title: work.title, editionSize: work.editionSize }, input)
    if (Object.keys(after).length === 0) return
    const namesake = (await Work.findAll()).find(({ id, title }) => id !== workId && isSameName(title, input.title))
    if (namesake) refuseField('title', `There is a work ${namesake.title} already.`)
    if (input.editionSize !== null) await requireRoom(workId, input.editionSize)
    const formerly = work.title
    await work.update(input)
    await stopBeingDemo(work, member)
    const sentences = [
      ...('title' in after ? [`${formerly} is called ${input.title} now.`] : []),
      ...('editionSize' in after
        ? [input.editionSize === null ? 'Its edition has no size.' : `Its edition has ${input.editionSize}.`]
        : []),
    ]
    await addFoundryEvent(
      { type: 'work', id: workId, name: work.title },
      { kind: 'work changed', by: member, at: clock.now(), text: sentences.join(' '), before, after },
    )
  })
}

/** Adds a section to a work. @throws {AppError} not_found; conflict with `fields` when the work has it already. */
export function addSection(workId: string, name: string, { member, clock }: By): Promise<void> {
  return inTransaction(async () => {
    const work = await findWork(workId)
    if (name === '') refuseField('name', 'Name the section.')
    await requireFreeSection(workId, name)
    const now = clock.now()
    await Section.create({ id: newId(now), workId, name })
    await stopBeingDemo(work, member)
    await addFoundryEvent(
      { type: 'work', id: workId, name: work.title },
      { kind: 'section added', by: member, at: now, text: `Section ${name} added to ${work.title}.`, after: { section: name } },
    )
  })
}

/**
 * Gives a section another name; empty where the work is cast in one.
 *
 * @throws {AppError} not_found; conflict with `fields` when the work has a section of that name, or has others and this one would
 *   go without.
 */
export function renameSection(sectionId: string, name: string, { member, clock }: By): Promise<void> {
  return inTransaction(async () => {
    const section = await Section.findByPk(sectionId)
    if (!section) throw new AppError('not_found', 'There is no such section.')
    if (section.name === name) return
    const work = await findWork(section.workId)
    if (name === '' && (await Section.count({ where: { workId: work.id } })) > 1) {
      refuseField('name', 'Name the section: the work has several.')
    }
    await requireFreeSection(work.id, name, sectionId)
    const before = section.name
    await section.update({ name })
    await stopBeingDemo(work, member)
    await addFoundryEvent(
      { type: 'work', id: work.id, name: work.title },
      {
        kind: 'section renamed',
        by: member,
        at: clock.now(),
        text: `${before === '' ? 'The section without a name' : `Section ${before}`} of ${work.title} is ${name === '' ? 'without a name' : `called ${name}`} now.`,
        before: { section: before },
        after: { section: name },
      },
    )
  })
}

async function findWork(workId: string): Promise<Work> {
  const work = await Work.findByPk(workId)
  if (!work) throw new AppError('not_found', 'There is no such work.')
  return work
}

async function requireFreeSection(workId: string, name: string, ofSectionId?: string): Promise<void> {
  const sections = await Section.findAll({ where: { workId } })
  const namesake = sections.find((section) => section.id !== ofSectionId && isSameName(section.name, name))
  if (namesake) refuseField('name', `There is a section ${namesake.name} already.`)
}

/** An edition does not shrink under the numbers that were cast. */
async function requireRoom(workId: string, editionSize: number): Promise<void> {
  const sectionIds = (await Section.findAll({ where: { workId } })).map(({ id }) => id)
  const highest: number | null = await Piece.max('editionNumber', { where: { sectionId: sectionIds } })
  if (highest !== null && highest > editionSize) {
    refuseField('editionSize', `Number ${highest} was cast already: the edition has at least that many.`)
  }
}

'use client'

import { useState } from 'react'
import { Field } from '@/app/_components/field'
import { Key } from '@/app/_components/key'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { addSectionAction, editWorkAction, renameSectionAction } from '@/app/(office)/works/actions'

export type WorkActsProps = { workId: string; title: string; editionSize: number | null; sections: readonly { id: string; name: string }[] }

/** What a supervisor may change of a work. */
export function WorkActs({ workId, title, editionSize, sections }: WorkActsProps) {
  const [isOpen, setIsOpen] = useState(false)
  return (
    <>
      <Key aria-expanded={isOpen} onPress={() => setIsOpen(!isOpen)}>
        Change the work
      </Key>
      {isOpen && (
        <section className="plate work-panel" aria-label="Change the work">
          <div className="plate-body grid gap-5">
            <WorkForm workId={workId} title={title} editionSize={editionSize} />
            {sections.map((section) => (
              <SectionForm key={section.id} section={section} />
            ))}
            <NewSectionForm key={sections.length} workId={workId} />
          </div>
        </section>
      )}
    </>
  )
}

function WorkForm({ workId, title, editionSize }: Omit<WorkActsProps, 'sections'>) {
  const form = useKeptForm(editWorkAction.bind(null, workId))
  return (
    <div>
      <form {...form.formProps} className="reason-form">
        <Field name="title" label="Title" defaultValue={title} maxLength={80} autoComplete="off" error={form.errorOf('title')} />
        <Field
          name="editionSize"
          label="Edition size"
          className="edition-size"
          inputMode="numeric"
          defaultValue={editionSize ?? ''}
          maxLength={4}
          autoComplete="off"
          hint="Higher numbers are refused; empty for none."
          error={form.errorOf('editionSize')}
        />
        <Key type="submit" tone="ink" isOff={form.isPending}>
          Save
        </Key>
      </form>
      <FormMessage state={form.state} />
    </div>
  )
}

function SectionForm({ section }: { section: { id: string; name: string } }) {
  const form = useKeptForm(renameSectionAction.bind(null, section.id))
  return (
    <div>
      <form {...form.formProps} className="reason-form">
        <Field
          name="name"
          label={section.name === '' ? 'The section without a name' : `Section ${section.name}`}
          defaultValue={section.name}
          placeholder="cast in one"
          maxLength={60}
          autoComplete="off"
          error={form.errorOf('name')}
        />
        <Key type="submit" tone="ink" isOff={form.isPending}>
          Rename
        </Key>
      </form>
      <FormMessage state={form.state} />
    </div>
  )
}

function NewSectionForm({ workId }: { workId: string }) {
  const form = useKeptForm(addSectionAction.bind(null, workId))
  return (
    <div>
      <form {...form.formProps} className="reason-form">
        <Field
          name="name"
          label="A further section"
          maxLength={60}
          autoComplete="off"
          hint="Until it is cast, every edition misses it."
          error={form.errorOf('name')}
        />
        <Key type="submit" icon="plus" isOff={form.isPending}>
          Add it
        </Key>
      </form>
      <FormMessage state={form.state} />
    </div>
  )
}

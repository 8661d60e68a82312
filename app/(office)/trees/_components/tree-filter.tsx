'use client'

import Form from 'next/form'
import { useEffect, useRef, type ChangeEvent } from 'react'
import { SelectField } from '@/app/_components/field'
import { POUR_FILTERS, TREE_SORTS, type TreeSort, type TreeView } from '@/lib/trees/tree-view'

const SORT_WORDS: Record<TreeSort, string> = {
  due: 'What is due',
  tag: 'Tag',
  piece: 'Piece',
  coats: 'Coats on',
  place: 'Place',
  recipe: 'Recipe',
  pour: 'Pour date',
}

const show = (event: ChangeEvent<HTMLSelectElement>) => event.currentTarget.form?.requestSubmit()

/** Keeps the address to what differs from the plain list. */
function leaveOutPlain({ formData }: FormDataEvent): void {
  const plain = [...formData].filter(([name, value]) => value === '' || (name === 'sort' && value === 'due'))
  for (const [name] of plain) formData.delete(name)
}

/** Finds, filters and sorts the list; all of it goes into the address bar, so that a view can be kept, sent and gone back to. */
export function TreeFilter({ view, recipes, places }: { view: TreeView; recipes: readonly string[]; places: readonly string[] }) {
  const find = useRef<HTMLInputElement>(null)
  useEffect(() => {
    // Where '/' led here from a page without a field to find in.
    if (location.hash === '#find-tree') find.current?.focus()
    const form = find.current?.form
    form?.addEventListener('formdata', leaveOutPlain)
    return () => form?.removeEventListener('formdata', leaveOutPlain)
  }, [])
  const isGone = view.group === 'gone'
  return (
    <Form action="/trees" role="search" className="filter-form" replace key={JSON.stringify({ ...view, page: 1 })}>
      {view.group !== null && <input type="hidden" name="state" value={view.group} />}
      {view.isDescending && <input type="hidden" name="order" value="desc" />}
      <div className="field filter-words">
        <label htmlFor="find-tree">Find a tree</label>
        <span className="flex gap-2">
          <input
            ref={find}
            id="find-tree"
            data-find
            className="input"
            type="search"
            name="q"
            defaultValue={view.query}
            maxLength={80}
            placeholder={isGone ? 'tag or piece' : 'tag, piece or place'}
            autoComplete="off"
            aria-keyshortcuts="/"
          />
          <button type="submit" className="key">
            Find
          </button>
        </span>
      </div>
      {!isGone && (
        <>
          <SelectField label="Recipe" name="recipe" defaultValue={view.recipe} onChange={show}>
            <option value="">All</option>
            {withCurrent(recipes, view.recipe).map((name) => (
              <option key={name}>{name}</option>
            ))}
          </SelectField>
          <SelectField label="Place" name="place" defaultValue={view.place} onChange={show}>
            <option value="">All</option>
            {withCurrent(places, view.place).map((name) => (
              <option key={name}>{name}</option>
            ))}
          </SelectField>
          <SelectField label="Pour" name="pour" defaultValue={view.pour ?? ''} onChange={show}>
            <option value="">All</option>
            {POUR_FILTERS.map(({ key, word }) => (
              <option key={key} value={key}>
                {word}
              </option>
            ))}
          </SelectField>
          <SelectField label="In order of" name="sort" defaultValue={view.sort} onChange={show}>
            {TREE_SORTS.map((sort) => (
              <option key={sort} value={sort}>
                {SORT_WORDS[sort]}
              </option>
            ))}
          </SelectField>
        </>
      )}
    </Form>
  )
}

/** A name that no tree carries any more stays to be seen, and to be taken off. */
function withCurrent(names: readonly string[], current: string): readonly string[] {
  return current === '' || names.includes(current) ? names : [...names, current]
}

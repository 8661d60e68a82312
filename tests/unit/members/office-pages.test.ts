import { describe, expect, it } from 'vitest'
import { currentPage, FOUNDRY_PAGES, OFFICE_TABS, pagesFor } from '@/lib/members/office-pages'

const words = (pages: readonly { word: string }[]) => pages.map(({ word }) => word)

describe('pagesFor', () => {
  it('gives the crew what it may look at, and the owner all', () => {
    expect(words(pagesFor('crew', OFFICE_TABS))).toEqual(['Floor', 'Trees', 'Burnout', 'Room', 'Recipes', 'Works'])
    expect(pagesFor('owner', FOUNDRY_PAGES)).toEqual(FOUNDRY_PAGES)
    expect(words(pagesFor('supervisor', FOUNDRY_PAGES))).not.toContain('People')
  })
})

describe('currentPage', () => {
  it('takes the nearest address, and not one that only begins with the same letters', () => {
    expect(currentPage('/settings/places', FOUNDRY_PAGES)?.word).toBe('Places')
    expect(currentPage('/settings', FOUNDRY_PAGES)?.word).toBe('The foundry')
    expect(currentPage('/trees/T-1/edit', OFFICE_TABS)?.word).toBe('Trees')
    expect(currentPage('/treeshop', OFFICE_TABS)).toBeNull()
  })
})

/** What a line of history is about, and where that is looked at now; null where no page shows it. */
export type HistorySubject = { type: string; name: string; href: string | null }

/** One thing that happened, as the page of the history shows it. */
export type HistoryLine = {
  /** Unique over both tables; also the place where the next page begins. */
  key: string
  /** Epoch milliseconds. */
  at: number
  kind: string
  text: string
  /** Null: Kilnward itself. */
  by: string | null
  /** Browser and system, in words; empty where none is known. */
  device: string
  subject: HistorySubject
  before: Readonly<Record<string, unknown>>
  after: Readonly<Record<string, unknown>>
}

const PAGE_OF: Readonly<Record<string, string>> = {
  foundry: '/settings',
  hours: '/settings/hours',
  closure: '/settings/hours',
  place: '/settings/places',
  bath: '/settings/baths',
  sensor: '/settings/sensors',
  mqtt: '/settings/mqtt',
  member: '/people',
  backup: '/upkeep',
  demo: '/upkeep',
}
/** Those with a page of their own for each. */
const FOLDER_OF: Readonly<Record<string, string>> = { recipe: '/recipes', work: '/works' }

/**
 * The address of what a line is about; null where no page shows it.
 *
 * @example subjectHref('recipe', '018f…') // => '/recipes/018f…'
 */
export function subjectHref(type: string, id: string): string | null {
  const folder = FOLDER_OF[type]
  if (folder !== undefined) return id === '' ? folder : `${folder}/${encodeURIComponent(id)}`
  return PAGE_OF[type] ?? null
}

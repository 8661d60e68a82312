import { may, type Act, type Role } from '@/lib/members/roles'

/** What a shell room has of what it needs before its first tree. */
export type SetUpStock = { faceBaths: number; backupBaths: number; sensors: number; places: number; recipes: number; people: number }

/** One line of the list beside an empty floor. Without `href` this member cannot bring it about. */
export type SetUpLine = { title: string; words: string; isDone: boolean; href: string | null }

const counted = (count: number, one: string, many: string) => `${count} ${count === 1 ? one : many}`

/**
 * What is there and what is missing before the first tree, in the order in which each needs the one before; each with the page that brings it.
 *
 * @example setUpLines(stock, 'supervisor').find(({ isDone }) => !isDone)?.title // => 'Baths'
 */
export function setUpLines({ faceBaths, backupBaths, sensors, places, recipes, people }: SetUpStock, role: Role): SetUpLine[] {
  const hasBaths = faceBaths > 0 && backupBaths > 0
  const line = (title: string, isDone: boolean, done: string, missing: string, act: Act, href: string): SetUpLine => ({
    title,
    words: isDone ? done : missing,
    isDone,
    href: may(role, act) ? href : null,
  })
  return [
    line(
      'Baths',
      hasBaths,
      counted(faceBaths + backupBaths, 'bath', 'baths'),
      faceBaths === 0 ? 'A face bath is missing' : 'A backup bath is missing',
      'baths',
      '/settings/baths',
    ),
    line(
      'Room sensor',
      sensors > 0,
      counted(sensors, 'sensor', 'sensors'),
      'Without one, read the wall hygrometer',
      'sensors',
      '/settings/sensors',
    ),
    line('Places', places > 0, counted(places, 'place', 'places'), 'Where trees hang, and the air there', 'places', '/settings/places'),
    line('Recipes', recipes > 0, counted(recipes, 'recipe', 'recipes'), 'Which coats a tree gets', 'recipes', '/recipes'),
    line('People', people > 1, counted(people, 'member', 'members'), 'Only one member so far', 'people', '/people'),
  ]
}

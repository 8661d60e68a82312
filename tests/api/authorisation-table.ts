import type { Act, Role } from '@/lib/members/roles'

/** Who may: everybody without signing in, a sensor with its token (and no member), or members from this role upwards. */
export type Who = 'anybody' | 'sensor' | Role

/** One door of the program. `example` is an address that fits the route; each [parameter] is a UUID where there is none. */
export type Door = { method: string; route: string; who: Who; example?: string }

const door = (method: string, route: string, who: Who, example?: string): Door => ({ method, route, who, ...(example ? { example } : {}) })
const page = (route: string, who: Who, example?: string): Door => door('PAGE', route, who, example)

/**
 * Every page and every method of every route. The tests fail on one that is missing here, and on one that is gone.
 * Routes are written as in the build: folders without the groups, parameters in brackets.
 */
export const DOORS: readonly Door[] = [
  // Leads to the floor, which asks for a sign-in.
  page('/', 'anybody'),
  page('/sign-in', 'anybody'),
  page('/floor', 'crew'),
  page('/trees', 'crew'),
  page('/trees/[tag]', 'crew', '/trees/KW-1'),
  page('/trees/[tag]/edit', 'supervisor', '/trees/KW-1/edit'),
  page('/trees/new', 'supervisor'),
  page('/burnout', 'crew'),
  // Recipes and works.
  page('/recipes', 'crew'),
  page('/recipes/new', 'supervisor'),
  page('/recipes/[recipeId]', 'crew'),
  page('/recipes/[recipeId]/new-version', 'supervisor'),
  page('/works', 'crew'),
  page('/works/[workId]', 'crew'),
  page('/me', 'crew'),
  door('GET', '/manifest.webmanifest', 'anybody'),

  door('GET', '/api/health', 'anybody'),
  // Its own tests are in auth.test.ts.
  door('GET', '/api/auth/[...nextauth]', 'anybody', '/api/auth/providers'),
  door('POST', '/api/auth/[...nextauth]', 'anybody', '/api/auth/signout'),

  door('GET', '/api/v1/queue', 'crew'),
  door('POST', '/api/v1/dips', 'operator'),
  door('POST', '/api/v1/dips/undo', 'operator'),
  door('POST', '/api/v1/trees/[treeId]/holds', 'operator'),
  door('POST', '/api/v1/trees/[treeId]/looks', 'operator'),
  door('POST', '/api/v1/trees/[treeId]/place', 'operator'),
  door('POST', '/api/v1/baths/[bathId]/stirs', 'operator'),
  door('GET', '/api/v1/push/subscriptions', 'crew'),
  door('POST', '/api/v1/push/subscriptions', 'crew'),
  door('DELETE', '/api/v1/push/subscriptions', 'crew'),
  door('POST', '/api/v1/push/test', 'crew'),
  door('POST', '/api/v1/trees/[treeId]/watch', 'crew'),
  door('DELETE', '/api/v1/trees/[treeId]/watch', 'crew'),
  door('POST', '/api/v1/readings', 'sensor'),
  door('POST', '/api/v1/readings/typed', 'operator'),
]

/** One server action: file and exported name, the act that its first line requires, and from which role upwards that is. */
export type ActionRow = { file: string; name: string; act: Act; who: Role }

/** Every server action; its first line is `await requireMember('act')`, or `const member = await …`. */
export const ACTIONS: readonly ActionRow[] = [
  { file: 'app/(office)/trees/new/actions.ts', name: 'createTreeAction', act: 'trees', who: 'supervisor' },
  { file: 'app/(office)/trees/[tag]/edit/actions.ts', name: 'editTreeAction', act: 'trees', who: 'supervisor' },
  { file: 'app/(office)/trees/[tag]/actions.ts', name: 'holdAction', act: 'hold', who: 'operator' },
  { file: 'app/(office)/trees/[tag]/actions.ts', name: 'moveAction', act: 'move', who: 'operator' },
  { file: 'app/(office)/trees/[tag]/actions.ts', name: 'intakeAction', act: 'intake', who: 'supervisor' },
  { file: 'app/(office)/trees/[tag]/actions.ts', name: 'liftHoldAction', act: 'lift hold', who: 'supervisor' },
  { file: 'app/(office)/trees/[tag]/actions.ts', name: 'lookOverAction', act: 'look over', who: 'supervisor' },
  { file: 'app/(office)/trees/[tag]/actions.ts', name: 'scrapAction', act: 'trees', who: 'supervisor' },
  // Recipes and works.
  { file: 'app/(office)/recipes/actions.ts', name: 'createRecipeAction', act: 'recipes', who: 'supervisor' },
  { file: 'app/(office)/recipes/actions.ts', name: 'addVersionAction', act: 'recipes', who: 'supervisor' },
  { file: 'app/(office)/recipes/actions.ts', name: 'renameRecipeAction', act: 'recipes', who: 'supervisor' },
  { file: 'app/(office)/recipes/actions.ts', name: 'retireRecipeAction', act: 'recipes', who: 'supervisor' },
  { file: 'app/(office)/recipes/actions.ts', name: 'moveTreesAction', act: 'recipes', who: 'supervisor' },
  { file: 'app/(office)/works/actions.ts', name: 'editWorkAction', act: 'works', who: 'supervisor' },
  { file: 'app/(office)/works/actions.ts', name: 'addSectionAction', act: 'works', who: 'supervisor' },
  { file: 'app/(office)/works/actions.ts', name: 'renameSectionAction', act: 'works', who: 'supervisor' },
  { file: 'app/(office)/burnout/actions.ts', name: 'releaseAction', act: 'release', who: 'supervisor' },
  { file: 'app/(office)/burnout/actions.ts', name: 'withdrawReleaseAction', act: 'release', who: 'supervisor' },
]

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
  // While nobody is a member; afterwards it leads to the floor, and from there to the sign-in.
  page('/first-run', 'anybody'),
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
  // Upkeep: the state of the program, and the records as a file.
  page('/upkeep', 'owner'),
  door('GET', '/api/v1/backups/newest', 'owner'),
  // The foundry's settings.
  page('/settings', 'supervisor'),
  page('/settings/hours', 'supervisor'),
  page('/settings/places', 'supervisor'),
  page('/settings/baths', 'supervisor'),
  page('/settings/sensors', 'supervisor'),
  page('/settings/sensors/[sensorId]', 'supervisor', '/settings/sensors/1'),
  // The broker of loggers.
  page('/settings/mqtt', 'supervisor'),
  // What finished coats say of the clock.
  page('/calibration', 'supervisor'),
  // People and one's own page.
  page('/people', 'owner'),
  page('/people/[memberId]', 'owner'),
  page('/me/password', 'crew'),
  door('GET', '/manifest.webmanifest', 'anybody'),

  door('GET', '/api/health', 'anybody'),
  // Its own tests are in auth.test.ts.
  door('GET', '/api/auth/[...nextauth]', 'anybody', '/api/auth/providers'),
  door('POST', '/api/auth/[...nextauth]', 'anybody', '/api/auth/signout'),

  door('GET', '/api/v1/queue', 'crew'),
  door('GET', '/api/v1/trees.csv', 'crew'),
  door('POST', '/api/v1/dips', 'operator'),
  door('POST', '/api/v1/dips/undo', 'operator'),
  door('POST', '/api/v1/trees/[treeId]/holds', 'operator'),
  door('POST', '/api/v1/trees/[treeId]/evidence', 'operator'),
  door('POST', '/api/v1/evidence/[evidenceId]/withdrawal', 'operator'),
  door('POST', '/api/v1/trees/[treeId]/place', 'operator'),
  door('POST', '/api/v1/baths/[bathId]/stirs', 'operator'),
  door('POST', '/api/v1/places/[placeId]/fans', 'operator'),
  door('GET', '/api/v1/push/subscriptions', 'crew'),
  door('POST', '/api/v1/push/subscriptions', 'crew'),
  door('DELETE', '/api/v1/push/subscriptions', 'crew'),
  door('POST', '/api/v1/push/test', 'crew'),
  door('POST', '/api/v1/trees/[treeId]/watch', 'crew'),
  door('DELETE', '/api/v1/trees/[treeId]/watch', 'crew'),
  door('POST', '/api/v1/readings', 'sensor'),
  door('POST', '/api/v1/readings/typed', 'operator'),

  // The room and its drying.
  page('/room', 'crew'),
  door('POST', '/api/v1/drying/estimate', 'crew'),
  door('GET', '/api/v1/rooms/[sensorId]/climate.csv', 'crew', '/api/v1/rooms/1/climate.csv'),
  // Files of readings.
  page('/room/upload', 'supervisor'),
  page('/room/upload/[uploadId]', 'supervisor'),
  door('POST', '/api/v1/uploads', 'supervisor'),
  door('GET', '/api/v1/uploads/[uploadId]', 'supervisor'),
  door('GET', '/api/v1/uploads/[uploadId]/preview', 'supervisor'),
  door('GET', '/api/v1/uploads/[uploadId]/errors.csv', 'supervisor'),
  door('POST', '/api/v1/rooms/[sensorId]/what-if', 'crew', '/api/v1/rooms/1/what-if'),
  // The API's description, how to use it, and the history of every change.
  door('GET', '/api/v1/openapi.json', 'anybody'),
  page('/api-guide', 'supervisor'),
  page('/history', 'supervisor'),
]

/** One server action: file and exported name, the act that its first line requires, and from which role upwards that is. */
export type ActionRow = { file: string; name: string; act: Act; who: Role } | { file: string; name: string; act: null; who: 'nobody yet' }

/**
 * Every server action; its first line is `await requireMember('act')`, or `const member = await …`.
 * Without an act it is for records in which nobody is a member yet, and its first line is `await requireNobody()`.
 */
export const ACTIONS: readonly ActionRow[] = [
  // Calibration.
  { file: 'app/(office)/calibration/actions.ts', name: 'acceptCoatsAction', act: 'calibrate', who: 'supervisor' },
  { file: 'app/(office)/calibration/actions.ts', name: 'acceptFactorAction', act: 'calibrate', who: 'supervisor' },
  { file: 'app/(office)/calibration/actions.ts', name: 'goBackAction', act: 'calibrate', who: 'supervisor' },
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
  { file: 'app/(office)/upkeep/actions.ts', name: 'backUpNowAction', act: 'upkeep', who: 'owner' },
  // The foundry's settings.
  { file: 'app/(office)/settings/actions.ts', name: 'saveFoundryAction', act: 'settings', who: 'owner' },
  { file: 'app/(office)/settings/hours/actions.ts', name: 'saveHoursAction', act: 'settings', who: 'owner' },
  { file: 'app/(office)/settings/hours/actions.ts', name: 'addClosureAction', act: 'settings', who: 'owner' },
  { file: 'app/(office)/settings/hours/actions.ts', name: 'changeClosureAction', act: 'settings', who: 'owner' },
  { file: 'app/(office)/settings/hours/actions.ts', name: 'removeClosureAction', act: 'settings', who: 'owner' },
  { file: 'app/(office)/settings/places/actions.ts', name: 'addPlaceAction', act: 'places', who: 'supervisor' },
  { file: 'app/(office)/settings/places/actions.ts', name: 'changePlaceAction', act: 'places', who: 'supervisor' },
  { file: 'app/(office)/settings/places/actions.ts', name: 'retirePlaceAction', act: 'places', who: 'supervisor' },
  { file: 'app/(office)/settings/places/actions.ts', name: 'reusePlaceAction', act: 'places', who: 'supervisor' },
  { file: 'app/(office)/settings/baths/actions.ts', name: 'addBathAction', act: 'baths', who: 'supervisor' },
  { file: 'app/(office)/settings/baths/actions.ts', name: 'changeBathAction', act: 'baths', who: 'supervisor' },
  { file: 'app/(office)/settings/baths/actions.ts', name: 'retireBathAction', act: 'baths', who: 'supervisor' },
  { file: 'app/(office)/settings/baths/actions.ts', name: 'reuseBathAction', act: 'baths', who: 'supervisor' },
  { file: 'app/(office)/settings/sensors/actions.ts', name: 'addSensorAction', act: 'sensors', who: 'supervisor' },
  { file: 'app/(office)/settings/sensors/actions.ts', name: 'renameSensorAction', act: 'sensors', who: 'supervisor' },
  { file: 'app/(office)/settings/sensors/actions.ts', name: 'retireSensorAction', act: 'sensors', who: 'supervisor' },
  { file: 'app/(office)/settings/sensors/actions.ts', name: 'reuseSensorAction', act: 'sensors', who: 'supervisor' },
  { file: 'app/(office)/settings/sensors/actions.ts', name: 'issueTokenAction', act: 'sensors', who: 'supervisor' },
  { file: 'app/(office)/settings/sensors/actions.ts', name: 'revokeTokenAction', act: 'sensors', who: 'supervisor' },
  // Offsets and devices of a sensor.
  { file: 'app/(office)/settings/sensors/actions.ts', name: 'saveOffsetAction', act: 'sensors', who: 'supervisor' },
  { file: 'app/(office)/settings/sensors/actions.ts', name: 'removeOffsetAction', act: 'sensors', who: 'supervisor' },
  { file: 'app/(office)/settings/sensors/actions.ts', name: 'replaceDeviceAction', act: 'sensors', who: 'supervisor' },
  // The broker of loggers.
  { file: 'app/(office)/settings/mqtt/actions.ts', name: 'saveBrokerAction', act: 'settings', who: 'owner' },
  { file: 'app/(office)/settings/mqtt/actions.ts', name: 'addTopicAction', act: 'sensors', who: 'supervisor' },
  { file: 'app/(office)/settings/mqtt/actions.ts', name: 'changeTopicAction', act: 'sensors', who: 'supervisor' },
  { file: 'app/(office)/settings/mqtt/actions.ts', name: 'removeTopicAction', act: 'sensors', who: 'supervisor' },
  // People and one's own page.
  { file: 'app/(office)/people/actions.ts', name: 'addMemberAction', act: 'people', who: 'owner' },
  { file: 'app/(office)/people/actions.ts', name: 'editMemberAction', act: 'people', who: 'owner' },
  { file: 'app/(office)/people/actions.ts', name: 'renewFirstPasswordAction', act: 'people', who: 'owner' },
  { file: 'app/(office)/people/actions.ts', name: 'disableMemberAction', act: 'people', who: 'owner' },
  { file: 'app/(office)/people/actions.ts', name: 'enableMemberAction', act: 'people', who: 'owner' },
  { file: 'app/(auth)/me/password/actions.ts', name: 'changePasswordAction', act: 'own password', who: 'crew' },
  { file: 'app/(office)/me/actions.ts', name: 'saveUnitsAction', act: 'see', who: 'crew' },
  { file: 'app/(office)/me/actions.ts', name: 'endSessionAction', act: 'see', who: 'crew' },
  { file: 'app/(office)/me/actions.ts', name: 'endOtherSessionsAction', act: 'see', who: 'crew' },
  // The first run, and the demo data.
  { file: 'app/(first-run)/first-run/actions.ts', name: 'makeFirstOwnerAction', act: null, who: 'nobody yet' },
  { file: 'app/(first-run)/first-run/actions.ts', name: 'endStepAction', act: 'settings', who: 'owner' },
  { file: 'app/(first-run)/first-run/actions.ts', name: 'takeStarterRecipesAction', act: 'recipes', who: 'supervisor' },
  { file: 'app/(first-run)/first-run/actions.ts', name: 'endFirstRunAction', act: 'settings', who: 'owner' },
  { file: 'app/(first-run)/first-run/actions.ts', name: 'lookWithDemoAction', act: 'upkeep', who: 'owner' },
  { file: 'app/(office)/upkeep/demo-actions.ts', name: 'layDemoAction', act: 'upkeep', who: 'owner' },
  { file: 'app/(office)/upkeep/demo-actions.ts', name: 'removeDemoAction', act: 'upkeep', who: 'owner' },
  // The room and its drying.
  { file: 'app/(office)/room/actions.ts', name: 'typedReadingAction', act: 'read', who: 'operator' },
  // Files of readings.
  { file: 'app/(office)/room/upload/actions.ts', name: 'importUploadAction', act: 'sensors', who: 'supervisor' },
  { file: 'app/(office)/room/upload/actions.ts', name: 'cancelUploadAction', act: 'sensors', who: 'supervisor' },
]

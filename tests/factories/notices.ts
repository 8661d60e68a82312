import { newId } from '@/lib/core/ids'
import type { Role } from '@/lib/members/roles'
import type { PushScope } from '@/lib/notices/push-contract'
import type { QueueTree } from '@/lib/queue/contract'
import { Bath, Coat, Member, Operation, Place, PushSubscription, Recipe, RecipeVersion, Sensor, Tree, TreeWatch } from '@/models'
import { buildDryTree, NOW } from '@/tests/factories/queue'
import type { FakeDevice } from '@/tests/setup/fake-push-service'

let count = 0
const next = () => (count += 1)
const stamp = { createdAt: NOW - 86_400_000 }

export type Shop = { placeId: string; bathId: string; recipeVersionId: string; memberId: string }

/** One rack, one bath, one recipe and a person to dip. */
export async function makeShop(): Promise<Shop> {
  const n = next()
  const sensor = await Sensor.create({ name: `Logger ${n}`, kind: 'logger', ...stamp })
  const place = await Place.create({
    id: newId(),
    name: `Rack ${n}`,
    airSpeedFansOnMps: 2,
    airSpeedFansOffMps: 0.2,
    sensorId: sensor.id,
    ...stamp,
  })
  const bath = await Bath.create({ id: newId(), name: `Backup ${n}`, kind: 'backup', ...stamp })
  const recipe = await Recipe.create({ id: newId(), name: `Recipe ${n}`, ...stamp })
  const version = await RecipeVersion.create({ id: newId(), recipeId: recipe.id, version: 1, ...stamp })
  const member = await makeMember()
  return { placeId: place.id, bathId: bath.id, recipeVersionId: version.id, memberId: member.id }
}

export async function makeMember(role: Role = 'operator'): Promise<{ id: string }> {
  const n = next()
  return Member.create({ id: newId(), name: `Member ${n}`, email: `m${n}@marramlane.example`, role, passwordHash: 'scrypt$x', ...stamp })
}

/** A tree in the database with one coat on, and the same tree as the queue shows it: dry. */
export async function makeDryTree(shop: Shop, minutesAgo = 5, overrides: Partial<QueueTree> = {}): Promise<QueueTree> {
  const tag = `T-${1000 + next()}`
  const tree = await Tree.create({
    id: newId(),
    tag,
    recipeVersionId: shop.recipeVersionId,
    waxMassKg: 3.5,
    cupKind: 'wax',
    cupVolumeL: 1,
    recessClass: 'none',
    spacing: 'open',
    updatedAt: NOW,
    ...stamp,
  })
  const coat = await makeCoat(shop, tree.id, 5)
  return buildDryTree(minutesAgo, {
    id: tree.id,
    tag,
    place: { id: shop.placeId, name: 'Rack B' },
    newestCoat: { id: coat.id, number: 5, dippedAt: NOW - 3_600_000 },
    ...overrides,
  })
}

export async function makeCoat(shop: Shop, treeId: string, number: number): Promise<{ id: string }> {
  const operation = await Operation.create({
    operationId: newId(),
    kind: 'dips',
    memberId: shop.memberId,
    bodyHash: 'a'.repeat(64),
    status: 201,
    response: {},
    ...stamp,
  })
  return Coat.create({
    id: newId(),
    treeId,
    number,
    operationId: operation.operationId,
    kind: 'backup',
    bathId: shop.bathId,
    stucco: 'coarse',
    way: 'dip',
    drainSeconds: 45,
    dippedAt: NOW - 3_600_000,
    placeId: shop.placeId,
    loggedBy: shop.memberId,
    loggedAt: NOW - 3_600_000,
    deviations: [],
    needReferenceHours: 4,
    moistureRatioBelow: 0,
  })
}

/** A member's device, subscribed at the fake push service. */
export async function makeDevice(
  device: Pick<FakeDevice, 'endpoint' | 'keys'>,
  { memberId, vapidPublicKey, scope = 'every tree' }: { memberId: string; vapidPublicKey: string; scope?: PushScope },
): Promise<PushSubscription> {
  return PushSubscription.create({
    id: newId(),
    memberId,
    endpoint: device.endpoint,
    ...device.keys,
    vapidPublicKey,
    scope,
    createdAt: NOW - 3_600_000,
  })
}

export const watch = (treeId: string, memberId: string) => TreeWatch.create({ treeId, memberId, createdAt: NOW })

/** Empties what a test on notices has written. */
export async function forgetNotices(): Promise<void> {
  const { Delivery, JobRun, Notice } = await import('@/models')
  await Delivery.destroy({ where: {} })
  await Notice.destroy({ where: {} })
  await JobRun.destroy({ where: {} })
  await PushSubscription.destroy({ where: {} })
  await TreeWatch.destroy({ where: {} })
}

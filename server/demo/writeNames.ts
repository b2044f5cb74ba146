import type { Transaction } from 'sequelize'
import { v7 } from 'uuid'
import { Kiln, Level, Membership, Studio } from '../models/index.js'
import type { DemoNetwork } from './types.js'

/** As lists of a studio are kept: after the fixed levels, among themselves by name. */
const OWN_POSITION = 1000

export async function writeStudios(
  { studios }: DemoNetwork,
  networkId: number,
  transaction: Transaction,
): Promise<Map<string, number>> {
  const rows = await Studio.bulkCreate(
    studios.map(({ key, ...studio }) => ({ ...studio, slug: key, networkId, uid: v7() })),
    { transaction },
  )
  return new Map(rows.map((studio) => [studio.slug, studio.id]))
}

export async function writeMemberships(
  { people: members }: DemoNetwork,
  networkId: number,
  {
    people,
    studios,
  }: { people: ReadonlyMap<string, number>; studios: ReadonlyMap<string, number> },
  transaction: Transaction,
): Promise<void> {
  await Membership.bulkCreate(
    members.flatMap(({ email, roles }) =>
      roles.map(({ role, studio }) => ({
        networkId,
        userId: must(people.get(email)),
        role,
        studioId: studio === null ? null : must(studios.get(studio)),
      })),
    ),
    { transaction },
  )
}

export async function writeKilns(
  { kilns }: DemoNetwork,
  networkId: number,
  studios: ReadonlyMap<string, number>,
  transaction: Transaction,
): Promise<Map<string, Kiln>> {
  const rows = await Kiln.bulkCreate(
    kilns.map(({ key: _, studio, ...kiln }) => ({
      ...kiln,
      networkId,
      studioId: must(studios.get(studio)),
      uid: v7(),
    })),
    { transaction },
  )
  return new Map(kilns.map(({ key }, index) => [key, must(rows[index])]))
}

/** Levels by `factor/key`: the fixed ones that the network was made with, by code, and the demo's own. */
export async function writeLevels(
  { levels }: DemoNetwork,
  networkId: number,
  studios: ReadonlyMap<string, number>,
  transaction: Transaction,
): Promise<Map<string, Level>> {
  const fixed = await Level.findAll({ where: { networkId }, transaction })
  const own = await Level.bulkCreate(
    levels.map(({ key: _, studio, ...level }) => ({
      ...level,
      networkId,
      position: OWN_POSITION,
      studioId: studio === null ? null : must(studios.get(studio)),
      uid: v7(),
    })),
    { transaction },
  )
  return new Map([
    ...fixed.map((level) => [`${level.factor}/${level.code}`, level] as const),
    ...levels.map(({ factor, key }, index) => [`${factor}/${key}`, must(own[index])] as const),
  ])
}

/** A class stands for its class level where a lot names the class alone. */
export function classLevels(
  { levels }: DemoNetwork,
  rows: ReadonlyMap<string, Level>,
): Map<string, number> {
  return new Map(
    levels.flatMap(({ factor, key, attributes }) => {
      if (factor !== 'class' || !attributes.classLevel) return []
      const level = must(rows.get(`class_level/${attributes.classLevel}`))
      return [[must(rows.get(`class/${key}`)).uid, level.id] as const]
    }),
  )
}

/** What the demo's own content names is there. */
export function must<T>(value: T | undefined): T {
  if (value === undefined) throw new Error('The demo names something that it does not have.')
  return value
}

import type { Model, ModelStatic, WhereOptions } from 'sequelize'
import { v7 } from 'uuid'
import { describe, expect, it } from 'vitest'
import { isForeignKey } from '../../server/database/violations.js'
import {
  AuditEvent,
  Finding,
  Firing,
  FiringLevel,
  Kiln,
  Level,
  Loss,
  Lot,
  LotLevel,
  Membership,
  ReportRevision,
  Studio,
  Study,
} from '../../server/models/index.js'
import { UnscopedQueryError } from '../../server/models/tenantGuard.js'
import { testDatabase } from '../support/database.js'
import { makeKiln, makeLevel, makeNetwork, makePerson, makeStudio } from '../support/factories.js'
import { rowsOf } from '../support/rows.js'
import { makeWorld } from '../support/wall.js'

const MODELS = [
  AuditEvent,
  Finding,
  Firing,
  FiringLevel,
  Kiln,
  Level,
  Loss,
  Lot,
  LotLevel,
  Membership,
  ReportRevision,
  Studio,
  Study,
]
// A model knows its table once it is defined on a database.
await testDatabase()
/** Tables of a network's rows: those with the key that composite foreign keys point to. */
const TENANT_TABLES = MODELS.map((model) => [model.name, model.getTableName() as string] as const)
const named = MODELS.map((model) => [model.name, model as ModelStatic<Model>] as const)

describe('a query that does not name its network throws', () => {
  it.each(named)('on %s', async (_, model) => {
    await testDatabase()
    const refused = expect.objectContaining({ name: 'UnscopedQueryError' })
    const wheres: WhereOptions[] = [{}, { id: 1 }, { networkId: [1, 2] }, { networkId: undefined }]
    for (const where of wheres) {
      await expect(model.findAll({ where })).rejects.toEqual(refused)
      await expect(model.findOne({ where })).rejects.toEqual(refused)
      await expect(model.count({ where })).rejects.toEqual(refused)
      await expect(model.update({ uid: v7() }, { where })).rejects.toEqual(refused)
      await expect(model.destroy({ where })).rejects.toEqual(refused)
    }
    await expect(model.findByPk(1)).rejects.toEqual(refused)
  })

  it('unless it says that it goes across all networks', async () => {
    const kiln = await makeKiln()
    const { uid } = kiln
    expect(await Kiln.count({ where: { uid }, acrossNetworks: true })).toBe(1)
    expect(await Kiln.count({ where: { uid, networkId: kiln.networkId } })).toBe(1)
  })

  it('and so does saving a row that names none', async () => {
    await testDatabase()
    const row = { studioId: 1, uid: v7(), name: 'Kiln' }
    await expect(Kiln.create(row as never)).rejects.toThrow()
    await expect(Kiln.build(row as never).save({ validate: false })).rejects.toBeInstanceOf(
      UnscopedQueryError,
    )
  })
})

describe('the keys of every tenant table', () => {
  const keysOf = (table: string) =>
    rowsOf<{ name: string; col: string; target: string | null; target_col: string | null }>(
      `SELECT constraint_name AS name, column_name AS col, referenced_table_name AS target, referenced_column_name AS target_col
       FROM information_schema.key_column_usage
       WHERE table_schema = DATABASE() AND table_name = :table ORDER BY constraint_name, ordinal_position`,
      { table },
    )
  const tenants = TENANT_TABLES.map(([, table]) => table)

  it.each(TENANT_TABLES)(
    '%s: its network is never missing, and (network, id) is a key',
    async (_, table) => {
      await testDatabase()
      const [column] = await rowsOf(
        `SELECT is_nullable AS nullable FROM information_schema.columns
       WHERE table_schema = DATABASE() AND table_name = :table AND column_name = 'network_id'`,
        { table },
      )
      expect(column).toEqual({ nullable: 'NO' })
      const keys = await keysOf(table)
      const unique = keys.filter(({ name }) => name === `${table}_tenant`).map(({ col }) => col)
      expect(unique).toEqual(['network_id', 'id'])
    },
  )

  it.each(TENANT_TABLES)(
    '%s: a foreign key to a tenant table takes the network along',
    async (_, table) => {
      await testDatabase()
      const foreign = (await keysOf(table)).filter(
        ({ target }) => target !== null && tenants.includes(target),
      )
      for (const name of new Set(foreign.map((key) => key.name))) {
        const columns = foreign.filter((key) => key.name === name)
        expect(columns[0], name).toMatchObject({ col: 'network_id', target_col: 'network_id' })
        expect(columns, name).toHaveLength(2)
      }
    },
  )
})

describe('a row that points into another network is refused by the database', () => {
  const refused = async (write: () => Promise<unknown>) => {
    const error: unknown = await write().then(
      () => null,
      (reason: unknown) => reason,
    )
    expect(isForeignKey(error), String(error)).toBe(true)
  }

  it('a kiln of a studio there', async () => {
    const [{ id: networkId }, there] = [await makeNetwork(), await makeStudio()]
    await refused(() => Kiln.create({ networkId, studioId: there.id, uid: v7(), name: 'Kiln' }))
  })

  it('a level of a studio there', async () => {
    const [{ id: networkId }, there] = [await makeNetwork(), await makeStudio()]
    const level = {
      networkId,
      studioId: there.id,
      uid: v7(),
      factor: 'glaze',
      name: 'Celadon',
      attributes: {},
    }
    await refused(() => Level.create(level))
  })

  it('a role in a studio there', async () => {
    const [{ id: networkId }, there, person] = [
      await makeNetwork(),
      await makeStudio(),
      await makePerson(),
    ]
    await refused(() =>
      Membership.create({ networkId, studioId: there.id, userId: person.id, role: 'owner' }),
    )
  })

  it('a firing of a kiln or a programme there', async () => {
    const [here, there] = [await makeKiln(), await makeKiln()]
    const programme = await makeLevel({ factor: 'programme' })
    const { networkId, studioId, id: kilnId } = here
    const firing = {
      networkId,
      studioId,
      kilnId,
      uid: v7(),
      kind: 'glaze',
      localDate: '2026-03-04',
      pieces: 1,
    } as const
    await refused(() => Firing.create({ ...firing, kilnId: there.id }))
    await refused(() => Firing.create({ ...firing, programmeId: programme.id }))
  })

  it('a lot of a firing or of a clay body there, a level, a loss and a revision of it', async () => {
    const [here, there] = [await makeWorld(), await makeWorld()]
    const networkId = here.network.id
    const [firingId, foreign] = [here.firing.id, there.firing.id]
    const lot = {
      networkId,
      studioId: here.studio.id,
      firingId,
      uid: v7(),
      position: 99,
      pieces: 1,
    }
    await refused(() => Lot.create({ ...lot, firingId: foreign }))
    await refused(() => Lot.create({ ...lot, clayBodyId: there.level.id }))
    const [theirs] = await Lot.findAll({
      where: { networkId: there.network.id, firingId: foreign },
    })
    const lotId = theirs?.id ?? 0
    await refused(() =>
      LotLevel.create({ networkId, lotId, factor: 'glaze', levelId: here.level.id }),
    )
    await refused(() =>
      FiringLevel.create({
        networkId,
        firingId: foreign,
        factor: 'cooling',
        levelId: here.level.id,
      }),
    )
    const loss = {
      networkId,
      firingId,
      lotId,
      uid: v7(),
      fault: 's-crack',
      alsoFaults: [] as string[],
      outcome: 'waster',
      pieces: 1,
      features: {},
    } as const
    await refused(() => Loss.create(loss))
    await refused(() =>
      ReportRevision.create({
        networkId,
        firingId: foreign,
        uid: v7(),
        number: 99,
        kind: 'amend',
        baseNumber: 1,
        serverTime: new Date('2026-03-04T05:06:07Z'),
        payload: {},
        payloadHash: 'x',
      }),
    )
  })
})

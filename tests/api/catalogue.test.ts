import { describe, expect, it } from 'vitest'
import { seedFixedLevels } from '../../server/commands/seedFixedLevels.js'
import { Level } from '../../server/models/index.js'
import { FACTORS } from '../../server/shared/factors.js'
import { PATHS, signedIn } from '../support/api.js'
import type { Agent } from '../support/api.js'
import {
  fixedLevel,
  makeKiln,
  makeLevel,
  makeNetwork,
  makePerson,
  makeStudio,
} from '../support/factories.js'
import { setting } from '../support/settings.js'
import { useLevels } from '../support/useLevels.js'

describe('the catalogue', () => {
  const get = async (agent: Agent, path: string) => (await agent.get(path).expect(200)).body

  it('holds the fixed levels of every factor that has some', async () => {
    const { owner, at } = await setting()
    const { levels } = await get(owner, at(PATHS.catalogue))
    for (const factor of FACTORS.filter(({ fixed }) => fixed)) {
      const codes = levels
        .filter((level: { factor: string }) => level.factor === factor.id)
        .map(({ code }: { code: string }) => code)
      expect(codes).toEqual(factor.fixed?.map(({ code }) => code))
    }
  })

  it('shows who works in one studio what is theirs, archived things marked', async () => {
    const { app, at, studio, network } = await setting()
    const other = await makeStudio({ network })
    await makeKiln({ studio: other })
    await makeLevel({ studio: other })
    const kiln = await makeKiln({ studio })
    const old = await makeKiln({ studio, archivedAt: new Date('2026-01-01T00:00:00Z') })
    const level = await makeLevel({ studio, archivedAt: new Date('2026-01-01T00:00:00Z') })
    const technician = await signedIn(
      app,
      await makePerson({ roles: [{ role: 'technician', studio }] }),
    )
    const answer = await get(technician, at(PATHS.catalogue))
    expect(answer.studios).toMatchObject([{ uid: studio.uid, archived: false }])
    const kilns = Object.fromEntries(
      answer.kilns.map((row: { uid: string; archived: boolean }) => [row.uid, row.archived]),
    )
    expect(kilns).toEqual({ [kiln.uid]: false, [old.uid]: true })
    const owned = answer.levels.filter((row: { studio: string | null }) => row.studio !== null)
    expect(owned).toMatchObject([{ uid: level.uid, studio: studio.uid, archived: true }])
  })

  it("gives the number that a kiln's counter will say next", async () => {
    const { owner, at, studio } = await setting()
    const level = async (factor: string) => (await makeLevel({ studio, factor })).id
    const { kiln } = await useLevels(studio, {
      clayBodyId: await level('clay_body'),
      glazeId: await level('glaze'),
      programmeId: await level('programme'),
    })
    const silent = await makeKiln({ studio })
    const { kilns } = await get(owner, at(PATHS.catalogue))
    const next = Object.fromEntries(
      kilns.map((row: { uid: string; nextNumber: number | null }) => [row.uid, row.nextNumber]),
    )
    expect(next).toEqual({ [kiln.uid]: 42, [silent.uid]: null })
  })
})

describe('the fixed levels of a network', () => {
  const count = (networkId: number) => Level.count({ where: { networkId } })

  it('are not added twice', async () => {
    const network = await makeNetwork()
    const before = await count(network.id)
    await Promise.all([seedFixedLevels(network.id), seedFixedLevels(network.id)])
    expect(await count(network.id)).toBe(before)
  })

  it('come back when one is missing, and adopt an entry of the same name', async () => {
    const network = await makeNetwork()
    const before = await count(network.id)
    const where = { networkId: network.id, factor: 'form' }
    await Level.destroy({ where: { ...where, code: 'mug' } })
    await Level.update({ code: null }, { where: { ...where, code: 'bowl' } })
    await seedFixedLevels(network.id)
    expect(await count(network.id)).toBe(before)
    expect(await fixedLevel(network, 'form', 'mug')).toMatchObject({ name: 'mugs', position: 0 })
    expect(await fixedLevel(network, 'form', 'bowl')).toMatchObject({ name: 'bowls' })
  })

  it('stay renamed', async () => {
    const network = await makeNetwork()
    await (await fixedLevel(network, 'form', 'mug')).update({ name: 'cups' })
    await seedFixedLevels(network.id)
    expect(
      await Level.count({ where: { networkId: network.id, factor: 'form', name: 'mugs' } }),
    ).toBe(0)
  })
})

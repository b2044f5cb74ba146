import { v7 } from 'uuid'
import { writeFirings } from '../../server/commands/writeFirings.js'
import { revisionInput } from '../../server/contract/firings.js'
import type { Kiln, Level, Studio } from '../../server/models/index.js'
import { Kiln as Kilns, Level as Levels } from '../../server/models/index.js'
import { addDays } from '../../server/shared/zonedTime.js'
import { testDeps } from './deps.js'
import { makeKiln, makeLevel, makeScope, networkOf } from './factories.js'
import { loadBodies } from './firings.js'
import type { LotOver } from './firings.js'

export interface Planted {
  kiln: Kiln
  /** S-cracks go with this clay body. */
  risky: Level
  safe: Level
}

export interface PlantOver {
  studio: Studio
  /** Clay bodies of the network unless given. */
  risky?: Level
  safe?: Level
  firings?: number
  /** Local day of the newest firing; the others are a day apart. */
  lastDay: string
  /** Levels of every lot beside its clay body. */
  also?: LotOver['levels']
}

/**
 * Bisque firings of one kiln, each of a lot of 20 pieces of either clay body: 6 S-cracks on the risky
 * one, 1 on the safe one in every other firing. Written in bulk.
 */
export async function plantFirings({
  studio,
  firings = 20,
  lastDay,
  also = {},
  ...over
}: PlantOver): Promise<Planted> {
  const network = await networkOf(studio)
  const kiln = await makeKiln({ studio })
  const risky = over.risky ?? (await makeLevel({ network, name: 'Porcelain' }))
  const safe = over.safe ?? (await makeLevel({ network, name: 'Buff stoneware' }))
  const deps = await testDeps()
  const [kilns, levels] = await Promise.all([
    Kilns.findAll({ where: { networkId: network.id } }),
    Levels.findAll({ where: { networkId: network.id } }),
  ])
  const whole = Array.from({ length: firings }, (_, i) => {
    const { pack, report } = loadBodies({
      kiln,
      kind: 'bisque',
      localDate: addDays(lastDay, -i),
      lots: [
        {
          pieces: 20,
          levels: { clay_body: risky, ...also },
          losses: [{ fault: 's-crack', pieces: 6 }],
        },
        {
          pieces: 20,
          levels: { clay_body: safe, ...also },
          losses: i % 2 === 0 ? [{ fault: 's-crack', pieces: 1 }] : [],
        },
      ],
    })
    const at = new Date(`${addDays(lastDay, -i)}T12:00:00Z`)
    const inputs = [
      { kind: 'pack', base: 0, deviceTime: null, pack },
      { kind: 'report', base: 1, deviceTime: null, report },
    ]
    return {
      uid: v7(),
      revisions: inputs.map((input) => ({
        uid: v7(),
        authorId: null,
        at,
        input: revisionInput.parse(input),
      })),
    }
  })
  const keys = {
    kilns: new Map(kilns.map(({ uid, id, studioId }) => [uid, { id, studioId }])),
    levels: new Map(levels.map(({ uid, id }) => [uid, id])),
  }
  const scope = await makeScope(network)
  await deps.sequelize.transaction((transaction) =>
    writeFirings(scope, whole, keys, { ...deps, transaction }),
  )
  return { kiln, risky, safe }
}

import { catalogueOutput } from '../contract/catalogue.js'
import { PATHS } from '../contract/paths.js'
import { presentCatalogue } from '../presenters/catalogue.js'
import { kilnsOfStudios, nextKilnNumbers } from '../queries/kilnsOfStudios.js'
import { levelsOfStudios } from '../queries/levelsOfStudios.js'
import { studiosOfNetwork } from '../queries/studiosOfNetwork.js'
import { defineRoute } from './defineRoute.js'
import type { Route } from './defineRoute.js'
import { seenStudioIds } from './visible.js'

/** Studios, kilns and levels in one answer; archived ones are marked, so that old filters keep their names. */
export const catalogueRoutes: readonly Route[] = [
  defineRoute({
    method: 'get',
    path: PATHS.catalogue,
    ability: 'catalogue.read',
    output: catalogueOutput,
    handle: async ({ scope, deps }) => {
      const studioIds = seenStudioIds(scope)
      const [studios, kilns, levels, next] = await Promise.all([
        studiosOfNetwork(scope, studioIds),
        kilnsOfStudios(scope, studioIds),
        levelsOfStudios(scope, { studioIds, archived: true }),
        nextKilnNumbers(scope, deps.sequelize),
      ])
      return presentCatalogue({ studios, kilns, levels, next }, scope)
    },
  }),
]

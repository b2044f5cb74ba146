import { stringify } from 'csv-stringify/sync'
import { z } from 'zod'
import { uid } from '../contract/common.js'
import { findingOutput, findingsInput, findingsOutput } from '../contract/findings.js'
import { PATHS } from '../contract/paths.js'
import { notFound } from '../errors.js'
import { studiosWith } from '../policies/index.js'
import type { Scope } from '../policies/index.js'
import { presentFinding, presentFindingDetail, presentStudy } from '../presenters/finding.js'
import { FINDING_CSV_HEADINGS, presentFindingCsv } from '../presenters/findingCsv.js'
import { findFinding } from '../queries/finding.js'
import { listFindings } from '../queries/findings.js'
import type { FindingFilters, FindingList } from '../queries/findings.js'
import { defineRoute } from './defineRoute.js'

const network = z.string()
/** More than a study keeps. */
const ALL = 10_000

async function listed(
  scope: Scope,
  filters: Omit<FindingFilters, 'readable'>,
): Promise<FindingList> {
  const list = await listFindings(scope, {
    ...filters,
    readable: studiosWith(scope, 'findings.read'),
  })
  if (!list) throw notFound()
  return list
}

/** What the newest study found: the list, the same as CSV, and one finding with its table and facts. */
export const findingRoutes = [
  defineRoute({
    method: 'get',
    path: PATHS.findings,
    ability: 'findings.read',
    query: findingsInput,
    output: findingsOutput,
    handle: async ({ scope, query }) => {
      const { study, rows, ...rest } = await listed(scope, query)
      return { ...rest, study: study && presentStudy(study), rows: rows.map(presentFinding) }
    },
  }),
  defineRoute({
    method: 'get',
    path: PATHS.findingsCsv,
    ability: 'findings.read',
    query: findingsInput.omit({ page: true, pageSize: true }),
    output: 'raw',
    handle: async ({ scope, query, res }) => {
      const { study, rows } = await listed(scope, { ...query, pageSize: ALL })
      const name = `findings-${scope.network.slug}${study ? `-${study.windowTo}` : ''}.csv`
      res.type('text/csv').attachment(name)
      res.send(
        stringify([FINDING_CSV_HEADINGS, ...rows.map(presentFindingCsv)], {
          bom: true,
          escape_formulas: true,
        }),
      )
    },
  }),
  defineRoute({
    method: 'get',
    path: PATHS.finding,
    ability: 'findings.read',
    params: z.object({ network, finding: uid }),
    output: findingOutput,
    handle: async ({ scope, params }) => {
      const finding = await findFinding(scope, params.finding, studiosWith(scope, 'findings.read'))
      if (!finding) throw notFound()
      return presentFindingDetail(finding)
    },
  }),
]

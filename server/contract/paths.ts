/**
 * Paths of the API, one place for routes, client and tests. `:name` parts are filled by `fill`.
 * Everything but session, links and account lives under its network.
 */
const NETWORK = '/api/networks/:network'
export const PATHS = {
  session: '/api/session',
  sessions: '/api/sessions',
  link: '/api/links/:token',
  account: '/api/account',
  accountPassword: '/api/account/password',
  version: '/api/version',
  catalogue: `${NETWORK}/catalogue`,
  studios: `${NETWORK}/studios`,
  studio: `${NETWORK}/studios/:studio`,
  studioArchived: `${NETWORK}/studios/:studio/archived`,
  kilns: `${NETWORK}/kilns`,
  kiln: `${NETWORK}/kilns/:kiln`,
  kilnArchived: `${NETWORK}/kilns/:kiln/archived`,
  levels: `${NETWORK}/levels`,
  level: `${NETWORK}/levels/:level`,
  levelArchived: `${NETWORK}/levels/:level/archived`,
  people: `${NETWORK}/people`,
  person: `${NETWORK}/people/:person`,
  personLink: `${NETWORK}/people/:person/link`,
  today: `${NETWORK}/today`,
  firings: `${NETWORK}/firings`,
  firingsCsv: `${NETWORK}/firings.csv`,
  lastFiring: `${NETWORK}/firings/last`,
  firing: `${NETWORK}/firings/:firing`,
  firingRevision: `${NETWORK}/firings/:firing/revisions/:revision`,
  firingVoid: `${NETWORK}/firings/:firing/void`,
  losses: `${NETWORK}/losses`,
  lossesBy: `${NETWORK}/losses/by/:dimension`,
  lossesByCsv: `${NETWORK}/losses/by/:dimension/csv`,
  findings: `${NETWORK}/findings`,
  finding: `${NETWORK}/findings/:finding`,
  findingsCsv: `${NETWORK}/findings.csv`,
  jobs: `${NETWORK}/jobs`,
  jobRuns: `${NETWORK}/jobs/:job/runs`,
} as const

/** Fills the `:name` parts of a path; a missing part throws. */
export function fill(path: string, parts: Record<string, string> = {}): string {
  return path.replace(/:([a-z]+)/gi, (_, name: string) => {
    const value = parts[name]
    if (value === undefined) throw new Error(`No ${name} for ${path}`)
    return encodeURIComponent(value)
  })
}

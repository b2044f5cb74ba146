/**
 * Who may import whom. One entry a folder, with the sentence that the developer reads when the rule is
 * broken. `only` names the sibling folders that may be imported, `never` those that may not; `types`
 * those of which only types may be; `packages` the packages that may be imported where they are few.
 */
const server = [
  {
    folder: 'server/shared',
    only: [],
    packages: ['jstat', 'ml-matrix'],
    because: 'server/shared runs on both sides: it imports nothing but a date or maths package.',
  },
  {
    folder: 'server/contract',
    only: ['shared'],
    packages: ['zod'],
    because: 'The contract is read by the client: it imports zod and server/shared alone.',
  },
  {
    folder: 'server/routes',
    only: ['contract', 'shared', 'policies', 'commands', 'queries', 'presenters', 'middleware'],
    because:
      'A route validates, loads, authorises, acts and presents; rows and mails are not its job.',
  },
  {
    folder: 'server/middleware',
    only: ['contract', 'shared', 'queries', 'policies', 'database'],
    because:
      'Middleware prepares a request with queries and policies; acting and presenting come later.',
  },
  {
    folder: 'server/commands',
    never: ['routes', 'presenters', 'middleware', 'demo', 'scheduling'],
    noPackages: ['express', 'express-session', 'passport'],
    because:
      'A command takes (scope, input, deps) and knows nothing of HTTP or of how a result is shown.',
  },
  {
    folder: 'server/queries',
    only: ['models', 'shared', 'contract', 'database'],
    types: ['policies'],
    noPackages: ['express'],
    because: 'A query answers one question from the database and returns plain rows.',
  },
  {
    folder: 'server/policies',
    only: ['contract', 'shared'],
    types: ['models', 'queries'],
    because: 'A policy decides from plain rows; it loads nothing.',
  },
  {
    folder: 'server/presenters',
    only: ['contract', 'shared', 'policies', 'statistics'],
    types: ['models', 'queries'],
    because: 'A presenter lists the fields of a row that it is given; it loads nothing.',
  },
  {
    folder: 'server/statistics',
    only: [],
    packages: ['cephes', 'ml-matrix'],
    because: 'A statistical method is pure: it imports maths packages and its neighbours alone.',
  },
  {
    folder: 'server/study',
    only: ['statistics', 'shared'],
    because: 'The study turns rows that it is given into findings; jobs/study.ts feeds it.',
  },
  ...['mail', 'photos', 'imports', 'curves', 'demo'].map((name) => ({
    folder: `server/${name}`,
    never: ['routes', 'middleware', 'presenters'],
    noPackages: ['express'],
    because: `server/${name} works on rows and shared rules; it knows nothing of routes.`,
  })),
]

const client = [
  {
    folder: 'src/components',
    never: ['stores', 'api', 'router', 'pages', 'layouts'],
    types: ['server/contract'],
    because: 'A component takes props and emits events; pages own queries, stores and routes.',
  },
  {
    folder: 'src/pages',
    never: ['pages'],
    because: 'A page arranges components; what two pages share is a component or a composable.',
  },
  {
    folder: 'src/layouts',
    never: ['pages'],
    because: 'A layout does not know which pages it holds; the router does.',
  },
  ...['composables', 'stores'].map((name) => ({
    folder: `src/${name}`,
    never: ['pages', 'layouts'],
    types: ['components'],
    because: 'Composables and stores serve pages and components and never run them.',
  })),
  {
    folder: 'src/api',
    never: ['pages', 'components', 'layouts', 'stores', 'composables', 'router'],
    because: 'src/api turns contract shapes into typed calls and query options, nothing more.',
  },
]

const SERVER_FOLDERS = [
  ...server.map(({ folder }) => folder.slice('server/'.length)),
  ...['models', 'migrations', 'database', 'scheduling', 'cli'],
]

const outside = (folders) => `(^|/)\\.\\./(${folders.join('|')})(/|\\.js$|$)`

/** The server's own folders are named in full, so that a file in a subfolder is judged alike. */
function serverPatterns({ folder, only, never, types = [], packages, noPackages, because }) {
  const own = folder.slice('server/'.length)
  const forbidden = never ?? SERVER_FOLDERS.filter((name) => name !== own && !only.includes(name))
  const values = forbidden.filter((name) => !types.includes(name))
  return [
    values.length > 0 && { regex: outside(values), message: because },
    types.length > 0 && { regex: outside(types), allowTypeImports: true, message: because },
    packages && { regex: `^(?!\\.|(${packages.join('|')})(/|$))`, message: because },
    noPackages && { regex: `^(${noPackages.join('|')})(/|$)`, message: because },
  ].filter(Boolean)
}

const REST_OF_SERVER = {
  regex: '(^|/)server/(?!shared/|contract/)',
  message: 'The client shares server/shared and server/contract with the server, nothing else.',
}

function clientPatterns({ folder, never, types = [], because }) {
  const pages = folder === 'src/pages' ? [{ regex: '^\\./.*\\.vue$', message: because }] : []
  return [
    { regex: outside(never), message: because },
    ...types.map((name) => ({
      regex: `(^|/)${name}/`,
      allowTypeImports: true,
      message: because,
    })),
    ...pages,
    REST_OF_SERVER,
  ]
}

const rule = (folder, patterns) => ({
  name: `imports of ${folder}`,
  files: [`${folder}/**/*.{ts,vue}`],
  rules: { '@typescript-eslint/no-restricted-imports': ['error', { patterns }] },
})

/** ESLint blocks; the general one of the client comes first, the folder's own replaces it. */
export const importRules = [
  rule('src', [REST_OF_SERVER]),
  ...client.map((entry) => rule(entry.folder, clientPatterns(entry))),
  ...server.map((entry) => rule(entry.folder, serverPatterns(entry))),
  {
    // The thread's entry point feeds the pure study with what the query streams.
    name: 'imports of the study thread',
    files: ['server/study/worker.ts'],
    rules: { '@typescript-eslint/no-restricted-imports': 'off' },
  },
  rule('jobs', [
    {
      regex: '(^|/)server/(routes|middleware|presenters|policies)/|^express(/|$)',
      message: 'A job is a thin entry point that calls commands, queries and the study; no HTTP.',
    },
  ]),
]

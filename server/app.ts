import { join } from 'node:path'
import compression from 'compression'
import ConnectSessionSequelize from 'connect-session-sequelize'
import express from 'express'
import type { Express } from 'express'
import session from 'express-session'
import helmet from 'helmet'
import { pinoHttp } from 'pino-http'
import type { Deps } from './deps.js'
import { createAuthentication } from './middleware/authenticate.js'
import { SESSION_COOKIE } from './middleware/sessionLife.js'
import { errorHandler, noSuchRoute } from './middleware/errorHandler.js'
import { requestContext } from './middleware/requestContext.js'
import { sameOrigin } from './middleware/sameOrigin.js'
import { tenant } from './middleware/tenant.js'
import { mount } from './routes/defineRoute.js'
import { ROUTES } from './routes/index.js'
import { sessionRoutes } from './routes/session.js'
import { healthRoutes } from './routes/health.js'
import { verifyPassword } from './commands/signIn.js'
import { defineSessionModel } from './models/Session.js'

const MONTH = 30 * 24 * 3600 * 1000

/** Path patterns of routes that a foreign origin may post to. */
function exemptions(): (method: string, path: string) => boolean {
  const open = ROUTES.filter((route) => route.csrf === 'token-in-url').map((route) => ({
    method: route.method.toUpperCase(),
    pattern: new RegExp(`^${route.path.replace(/:[a-z]+/gi, '[^/]+')}$`),
  }))
  return (method, path) => open.some((each) => each.method === method && each.pattern.test(path))
}

/**
 * The application, without listening. Sessions live in MariaDB, so that several servers may share it.
 * Closing: call `close` to stop the session store's timer.
 */
export function createApp(deps: Deps): { app: Express; close: () => void } {
  const { config, logger, sequelize } = deps
  const app = express()
  app.disable('x-powered-by')
  app.set('trust proxy', config.trustProxy)
  const secure = config.baseUrl.startsWith('https:')

  app.use(requestContext)
  app.use(
    pinoHttp({
      logger,
      genReqId: (req) => (req as { requestId?: string }).requestId ?? '',
      autoLogging: false,
    }),
  )
  app.use(
    helmet({
      contentSecurityPolicy: {
        useDefaults: false,
        directives: {
          defaultSrc: ["'self'"],
          scriptSrc: ["'self'"],
          connectSrc: ["'self'"],
          workerSrc: ["'self'"],
          styleSrc: ["'self'", "'unsafe-inline'"],
          fontSrc: ["'self'"],
          imgSrc: ["'self'", 'data:', 'blob:'],
          objectSrc: ["'none'"],
          baseUri: ["'none'"],
          frameAncestors: ["'none'"],
          formAction: ["'self'"],
        },
      },
      strictTransportSecurity: secure,
    }),
  )
  app.use(compression())

  const Store = ConnectSessionSequelize(session.Store)
  defineSessionModel(sequelize)
  const store = new Store({
    db: sequelize,
    table: 'Session',
    extendDefaultFields: (defaults: object, data: { passport?: { user?: string } }) => ({
      ...defaults,
      userId: data.passport?.user ? Number(data.passport.user.split(':')[0]) : null,
    }),
  })
  const auth = createAuthentication((email, password, req) =>
    verifyPassword({ email, password, address: req.ip ?? '' }, deps),
  )

  mount(app, healthRoutes, deps)
  app.use(
    '/api',
    session({
      name: SESSION_COOKIE,
      secret: config.sessionSecret,
      resave: false,
      saveUninitialized: false,
      rolling: false,
      store,
      cookie: { httpOnly: true, sameSite: 'lax', secure: secure || 'auto', maxAge: MONTH },
    }),
    auth.session,
    sameOrigin(config.baseUrl, exemptions()),
    express.json({ limit: '2mb' }),
    (_req, res, next) => {
      res.setHeader('Cache-Control', 'no-store')
      next()
    },
  )
  mount(app, sessionRoutes(auth.signIn), deps)
  app.use('/api/networks/:network', tenant)
  mount(app, ROUTES, deps)
  app.use('/api', noSuchRoute)
  serveClient(app, config.clientFolder)
  app.use(errorHandler(logger))
  return { app, close: () => store.stopExpiringSessions() }
}

/** The built client: hashed assets for a year, everything else asked again; unknown paths are pages. */
function serveClient(app: Express, folder: string): void {
  app.use(
    '/assets',
    express.static(join(folder, 'assets'), { immutable: true, maxAge: '1y', fallthrough: false }),
  )
  app.use(
    express.static(folder, {
      index: false,
      setHeaders: (res) => res.setHeader('Cache-Control', 'no-cache'),
    }),
  )
  app.get('/{*path}', (_req, res, next) => {
    res.setHeader('Cache-Control', 'no-cache')
    res.sendFile('index.html', { root: folder }, (error) => {
      if (error) next(error)
    })
  })
}

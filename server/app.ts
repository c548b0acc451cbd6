// The composition root: everything is put together here and nothing listens yet.
import { createServer, type Server as HttpServer } from 'node:http'
import { createServer as createTlsServer } from 'node:https'
import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import compression from 'compression'
import express from 'express'
import pg from 'pg'
import type { Relation } from '@shared/access/relations'
import { barMapRoutes } from '@shared/contracts/bar-maps'
import { accountRoutes } from '@shared/contracts/account'
import { clipRoutes } from '@shared/contracts/clips'
import { commentRoutes } from '@shared/contracts/comments'
import { groupEventRoutes } from '@shared/contracts/group-events'
import { groupRoutes, invitationRoutes, linkRoutes } from '@shared/contracts/groups'
import { preferenceRoutes } from '@shared/contracts/preferences'
import { savedLoopRoutes } from '@shared/contracts/saved-loops'
import { sessionRoutes } from '@shared/contracts/sessions'
import { siteRoutes } from '@shared/contracts/site'
import { recordingRoutes, takeRoutes } from '@shared/contracts/takes'
import { chartRoutes, tuneRoutes } from '@shared/contracts/tunes'
import { problem } from '@shared/errors/problems'
import { type Bounds, limits } from '@shared/limits'
import { chartDocument } from '@shared/music/chart-document'
import { barMapDocument } from '@shared/timing/bar-map-document'
import { createRelations } from '@server/access/relations'
import { takeRelations } from '@server/access/take-relations'
import { allows } from '@shared/access/permissions'
import type { Config } from '@server/config'
import { connect } from '@server/db/knex'
import { createRateLimits, headers, requestId, sameOrigin } from '@server/http/guards'
import { mount } from '@server/http/mount'
import { openApi } from '@server/http/openapi'
import { servePage } from '@server/http/page'
import { problemHandler } from '@server/http/problem'
import { createReceiver } from '@server/http/receive-upload'
import { createSignIn } from '@server/http/sign-in'
import { startQueue } from '@server/jobs/queue'
import type { Logger } from '@server/logger'
import { createLocalStorage } from '@server/media/storage'
import { startRealtime } from '@server/realtime/realtime'
import { createAccessRepo } from '@server/repositories/access.repo'
import { createAccountsRepo } from '@server/repositories/accounts.repo'
import { createAuditRepo } from '@server/repositories/audit.repo'
import { createClipsRepo } from '@server/repositories/clips.repo'
import { createCommentsRepo } from '@server/repositories/comments.repo'
import { createDocumentsRepo } from '@server/repositories/documents.repo'
import { createEventsRepo } from '@server/repositories/events.repo'
import { createGroupsRepo } from '@server/repositories/groups.repo'
import { createInvitationsRepo } from '@server/repositories/invitations.repo'
import { createLinksRepo } from '@server/repositories/links.repo'
import { createPreferencesRepo } from '@server/repositories/preferences.repo'
import { createRecordingsRepo } from '@server/repositories/recordings.repo'
import { createSavedLoopsRepo } from '@server/repositories/saved-loops.repo'
import { createSessionsRepo } from '@server/repositories/sessions.repo'
import { createTakesRepo } from '@server/repositories/takes.repo'
import { createTunesRepo } from '@server/repositories/tunes.repo'
import { accountHandlers } from '@server/routes/account.routes'
import { clipHandlers } from '@server/routes/clips.routes'
import { commentHandlers } from '@server/routes/comments.routes'
import { documentHandlers } from '@server/routes/documents.routes'
import { groupEventHandlers } from '@server/routes/group-events.routes'
import { groupHandlers, invitationHandlers, linkHandlers } from '@server/routes/groups.routes'
import { preferenceHandlers } from '@server/routes/preferences.routes'
import { savedLoopHandlers } from '@server/routes/saved-loops.routes'
import { sessionHandlers } from '@server/routes/sessions.routes'
import { recordingHandlers, takeHandlers } from '@server/routes/takes.routes'
import { tuneHandlers } from '@server/routes/tunes.routes'
import { createAccountService } from '@server/services/account.service'
import { createClipService } from '@server/services/clips.service'
import { createCommentService } from '@server/services/comments.service'
import { createDocumentService } from '@server/services/documents.service'
import { createGroupEventService } from '@server/services/group-events.service'
import { createGroupService } from '@server/services/groups.service'
import { createInvitationService } from '@server/services/invitations.service'
import { createLinkService } from '@server/services/links.service'
import { createPlayedOverService } from '@server/services/played-over'
import { createPreferenceService } from '@server/services/preferences.service'
import { createRecordingService } from '@server/services/recordings.service'
import { createSavedLoopService } from '@server/services/saved-loops.service'
import { createSessionService } from '@server/services/sessions.service'
import { createTakeService } from '@server/services/takes.service'
import { createTuneService } from '@server/services/tunes.service'

export interface AppDeps {
  config: Config
  log: Logger
  now(): number
  /** Tests drive many people from one address. */
  limitScale?: number
  /** Other sizes than shared/limits.ts says, for tests of what happens past them. */
  bounds?: Partial<Bounds>
}

export const buildApp = async ({ config, log, now, limitScale = 1, bounds: given }: AppDeps) => {
  const bounds: Bounds = { ...limits, ...given }
  const db = connect(config.databaseUrl)
  const pool = new pg.Pool({ connectionString: config.databaseUrl, max: 6, application_name: 'plumbline-sign-in' })
  pool.on('error', (error) => log.warn('db', 'a sign-in connection was lost', { error: error.message }))
  const queue = await startQueue(config.databaseUrl, log, 'server')
  const storage = createLocalStorage(config.storageDir)
  const nowDate = () => new Date(now())

  const accountsRepo = createAccountsRepo(db)
  const accessRepo = createAccessRepo(db)
  const takesRepo = createTakesRepo(db)
  const tunesRepo = createTunesRepo(db)
  const groupsRepo = createGroupsRepo(db)
  const sessionsRepo = createSessionsRepo(db)
  const events = createEventsRepo(db)
  const audit = createAuditRepo(db)

  const relations = createRelations(accessRepo)
  const documentsRepo = createDocumentsRepo(db)
  const documents = createDocumentService({ db, documents: documentsRepo, events })
  const groups = createGroupService({ db, groups: groupsRepo, events, audit })
  const invitations = createInvitationService({
    db,
    invitations: createInvitationsRepo(db),
    groups: groupsRepo,
    groupService: groups,
    events,
    audit,
    now: nowDate
  })
  const accounts = createAccountService({ db, accounts: accountsRepo, audit, groups, invitations })
  const links = createLinkService({ db, links: createLinksRepo(db), access: accessRepo, events })
  const tunes = createTuneService({ db, tunes: tunesRepo, documents, events, audit })
  const takes = createTakeService({
    db,
    takes: takesRepo,
    tunes: tunesRepo,
    access: accessRepo,
    groups: groupsRepo,
    events,
    audit,
    storage,
    queue,
    playedOver: createPlayedOverService({ takes: takesRepo, documents: documentsRepo, edits: documents }),
    bounds
  })
  const recordings = createRecordingService({ db, recordings: createRecordingsRepo(db), takes, storage, bounds })
  const comments = createCommentService({ db, comments: createCommentsRepo(db), takes: takesRepo, events })
  const savedLoops = createSavedLoopService({ db, savedLoops: createSavedLoopsRepo(db), takes: takesRepo })
  const clips = createClipService({
    db,
    clips: createClipsRepo(db),
    takes: takesRepo,
    documents: documentsRepo,
    storage,
    queue,
    bounds,
    now: nowDate
  })
  const preferences = createPreferenceService({ preferences: createPreferencesRepo(db) })
  const groupEvents = createGroupEventService({ events, access: accessRepo })
  const audibleSessions = async (userId: string, takeIds: string[]) => {
    const audible = new Map<string, ReadonlySet<Relation>>()
    for (const [takeId, standing] of await accessRepo.takeStandings(userId, takeIds)) {
      const held = takeRelations(standing)
      if (allows('take:hear', held)) audible.set(takeId, held)
    }
    return audible
  }
  const sessions = createSessionService({
    db,
    sessions: sessionsRepo,
    takes: takesRepo,
    access: { audibleSessions },
    events,
    now
  })

  const signIn = createSignIn({
    pool,
    secret: config.sessionSecret,
    isSecure: config.isSecure,
    find: accounts.find,
    check: accounts.check,
    now
  })
  const rates = createRateLimits(limitScale)
  const app = express()
  app.disable('x-powered-by')
  if (config.trustProxy !== null) app.set('trust proxy', config.trustProxy)
  app.use(requestId, ...headers(config.isSecure), compression())
  const isUp = async (): Promise<boolean> =>
    db.raw('select 1').then(
      () => true,
      () => false
    )
  app.get(siteRoutes.health.path, async (_req, res) => {
    const database = await isUp()
    res
      .status(database ? 200 : 503)
      .set('Cache-Control', 'no-store')
      .json({ status: database ? 'ok' : 'failing', database })
  })
  const description = JSON.stringify(openApi(config.isSecure ? '__Host-plumbline' : 'plumbline'))
  app.get(siteRoutes.openapi.path, (_req, res) => {
    res.type('json').send(description)
  })

  const api = express.Router()
  api.use(rates.general, sameOrigin, ...signIn.middleware)
  const serve = mount({
    relations,
    receive: createReceiver(await storage.incomingFolder(), bounds.uploadBytes),
    signIn,
    denied: (actor, _def, asker) => accounts.denied(actor, asker)
  })
  serve(api, accountRoutes, accountHandlers({ accounts, limits: rates }))
  serve(api, preferenceRoutes, preferenceHandlers(preferences))
  serve(api, groupRoutes, groupHandlers(groups))
  serve(api, invitationRoutes, invitationHandlers(invitations, rates))
  serve(api, linkRoutes, linkHandlers(links))
  serve(api, groupEventRoutes, groupEventHandlers(groupEvents))
  serve(api, tuneRoutes, tuneHandlers(tunes))
  serve(
    api,
    chartRoutes,
    documentHandlers({
      documents,
      kind: chartDocument,
      place: (actor, params: { tuneId: string }) => tunes.chartPlace(actor, params.tuneId)
    })
  )
  serve(api, takeRoutes, takeHandlers(takes))
  serve(
    api,
    barMapRoutes,
    documentHandlers({
      documents,
      kind: barMapDocument,
      place: (actor, params: { takeId: string }) => takes.barMapPlace(actor, params.takeId)
    })
  )
  serve(api, recordingRoutes, recordingHandlers(recordings))
  serve(api, commentRoutes, commentHandlers(comments))
  serve(api, savedLoopRoutes, savedLoopHandlers(savedLoops))
  serve(api, clipRoutes, clipHandlers(clips))
  serve(api, sessionRoutes, sessionHandlers(sessions))
  api.all('/api/{*path}', () => {
    throw problem('not-found')
  })
  app.use((req, res, next) => (req.path.startsWith('/api/') ? api(req, res, next) : next()))
  servePage(app, join(config.storageDir, 'build'))
  app.use(problemHandler(log))

  const http: HttpServer = config.tls
    ? createTlsServer({ cert: readFileSync(config.tls.cert), key: readFileSync(config.tls.key) }, app)
    : createServer(app)
  // An upload of a gigabyte over a slow line takes longer than node's five minutes.
  http.requestTimeout = 6 * 3600_000
  const realtime = await startRealtime({
    http,
    databaseUrl: config.databaseUrl,
    relations,
    accounts: accountsRepo,
    access: accessRepo,
    takes: takesRepo,
    sessionsRepo,
    sessions,
    groupEvents,
    signIn: signIn.middleware,
    log,
    now
  })

  return {
    app,
    api,
    http,
    db,
    storage,
    io: realtime.io,
    close: async (): Promise<void> => {
      await realtime.close()
      await new Promise<void>((done) => {
        http.close(() => done())
        http.closeAllConnections()
      })
      signIn.close()
      await queue.stop()
      await pool.end()
      await db.destroy()
    }
  }
}
export type App = Awaited<ReturnType<typeof buildApp>>

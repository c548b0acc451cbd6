// Every route there is. What is not here is not served (a test walks the server's router to make sure).
import { accountRoutes } from '@shared/contracts/account'
import { barMapRoutes } from '@shared/contracts/bar-maps'
import { clipRoutes } from '@shared/contracts/clips'
import { commentRoutes } from '@shared/contracts/comments'
import { groupEventRoutes } from '@shared/contracts/group-events'
import { groupRoutes, invitationRoutes, linkRoutes } from '@shared/contracts/groups'
import { preferenceRoutes } from '@shared/contracts/preferences'
import type { RouteDef } from '@shared/contracts/route'
import { savedLoopRoutes } from '@shared/contracts/saved-loops'
import { sessionRoutes } from '@shared/contracts/sessions'
import { siteRoutes } from '@shared/contracts/site'
import { recordingRoutes, takeRoutes } from '@shared/contracts/takes'
import { chartRoutes, tuneRoutes } from '@shared/contracts/tunes'

export const registry = {
  site: siteRoutes,
  account: accountRoutes,
  preferences: preferenceRoutes,
  groups: groupRoutes,
  invitations: invitationRoutes,
  links: linkRoutes,
  groupEvents: groupEventRoutes,
  tunes: tuneRoutes,
  charts: chartRoutes,
  takes: takeRoutes,
  recordings: recordingRoutes,
  barMaps: barMapRoutes,
  comments: commentRoutes,
  savedLoops: savedLoopRoutes,
  clips: clipRoutes,
  sessions: sessionRoutes
} as const

export const allRoutes = (): { name: string; def: RouteDef }[] =>
  Object.entries(registry).flatMap(([noun, routes]) =>
    Object.entries(routes as Record<string, RouteDef>).map(([verb, def]) => ({ name: `${noun}.${verb}`, def }))
  )

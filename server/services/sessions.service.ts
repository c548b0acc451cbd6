// Listening together: the server holds where the shared playhead is, who leads and who is here.
import type { z } from 'zod'
import { abilitiesOn } from '@shared/access/permissions'
import type { Relation } from '@shared/access/relations'
import type { Session, TransportState } from '@shared/contracts/sessions'
import { problem } from '@shared/errors/problems'
import type { TransportChange } from '@shared/events/realtime'
import { sessionPosition } from '@shared/timing/session-position'
import type { Db } from '@server/db/knex'
import type { Actor } from '@server/http/handlers'
import type { EventsRepo } from '@server/repositories/events.repo'
import type { SessionsRepo, StoredSession } from '@server/repositories/sessions.repo'
import type { TakesRepo } from '@server/repositories/takes.repo'
import { stillAllowed } from '@server/services/still-allowed'

interface Deps {
  db: Db
  sessions: SessionsRepo
  takes: Pick<TakesRepo, 'find'>
  access: { audibleSessions(userId: string, takeIds: string[]): Promise<Map<string, ReadonlySet<Relation>>> }
  events: EventsRepo
  now(): number
}
type Held = ReadonlySet<Relation>

/** Gives other players time to hear of a change before it happens, ms. */
const leadInMs = 120

const withPeople = async (stored: StoredSession, held: Held, sessions: SessionsRepo, trx?: Db): Promise<Session> => {
  const { takeDurationSec: _, ...session } = stored
  return { ...session, people: await sessions.people(stored.id, trx), abilities: abilitiesOn('session', held) }
}

/** The state after a change asked for at server time `nowMs`: what was left out goes on from where it is. */
export const changedTransport = (
  before: TransportState,
  change: Omit<z.infer<typeof TransportChange>, 'sessionId'>,
  durationSec: number,
  nowMs: number
): TransportState => {
  const atServerMs = Math.max(nowMs + leadInMs, before.atServerMs)
  const reached = sessionPosition({ ...before, durationSec }, atServerMs)
  const loop = change.loop === undefined ? before.loop : change.loop
  const wanted = change.positionSec ?? reached.positionSec
  return {
    revision: before.revision + 1,
    positionSec: Math.min(Math.max(0, wanted), durationSec),
    rate: change.rate ?? before.rate,
    semitones: change.semitones ?? before.semitones,
    playing: change.playing ?? reached.playing,
    loop,
    atServerMs
  }
}

export const createSessionService = ({ db, sessions, takes, access, events, now }: Deps) => {
  const live = async (id: string, trx: Db): Promise<StoredSession> => {
    const stored = await sessions.lock(id, trx)
    if (!stored) throw problem('not-found')
    if (stored.endedAt) throw problem('session-over')
    return stored
  }
  const find = async (id: string, held: Held = new Set()): Promise<Session | null> => {
    const stored = await sessions.find(id)
    return stored && withPeople(stored, held, sessions)
  }
  const whole = async (id: string, held: Held): Promise<Session> => {
    const session = await find(id, held)
    if (!session) throw problem('not-found')
    return session
  }

  /** When whoever leads is not here any more, the lead falls to the one who has been here longest. */
  const passOn = async (stored: StoredSession, trx: Db): Promise<void> => {
    const here = (await sessions.people(stored.id, trx)).filter((one) => one.isHere)
    if (here.some((one) => one.id === stored.leaderId)) return
    await sessions.setLeader(stored.id, here[0]?.id ?? null, trx)
  }

  return {
    find,
    get: whole,
    liveOfGroup: async (actor: Actor, groupId: string): Promise<{ items: Session[] }> => {
      const all = await sessions.liveOfGroup(groupId)
      const audible = await access.audibleSessions(
        actor.id,
        all.map((session) => session.takeId)
      )
      const items = await Promise.all(
        all.flatMap((session) => {
          const held = audible.get(session.takeId)
          return held ? [withPeople(session, held, sessions)] : []
        })
      )
      return { items }
    },
    start: async (actor: Actor, held: Held, takeId: string, id: string): Promise<Session> => {
      const take = await takes.find(takeId)
      if (!take) throw problem('not-found')
      if (take.state !== 'ready') throw problem('not-ready', { detail: 'This recording is still being read.' })
      const sessionId = await db.transaction(async (trx) => {
        await stillAllowed(actor, 'take:session', { takeId }, take.groupId, trx)
        const open = await sessions.liveOfTake(takeId, trx)
        if (open) return open.id
        const transport: TransportState = {
          revision: 0,
          positionSec: 0,
          rate: 1,
          semitones: 0,
          playing: false,
          loop: null,
          atServerMs: now()
        }
        await sessions.insert({ id, groupId: take.groupId, takeId, startedBy: actor.id, transport }, trx)
        await events.add(
          { groupId: take.groupId, type: 'session:started', objectId: id, takeId, actorId: actor.id },
          trx
        )
        return id
      })
      return whole(sessionId, new Set([...held, 'author' as const]))
    },
    end: async (actor: Actor, held: Held, id: string): Promise<Session> => {
      const { groupId } = await whole(id, held)
      await db.transaction(async (trx) => {
        await stillAllowed(actor, 'session:end', { sessionId: id }, groupId, trx)
        const stored = await sessions.lock(id, trx)
        if (!stored) throw problem('not-found')
        if (stored.endedAt) return
        await sessions.end(id, trx)
        await events.add(
          { groupId: stored.groupId, type: 'session:ended', objectId: id, takeId: stored.takeId, actorId: actor.id },
          trx
        )
      })
      return whole(id, held)
    },
    join: async (actor: Actor, held: Held, id: string): Promise<Session> => {
      await db.transaction(async (trx) => {
        const stored = await live(id, trx)
        await sessions.join(id, actor.id, trx)
        await passOn(stored, trx)
      })
      return whole(id, held)
    },
    leave: (actor: Actor, id: string): Promise<void> =>
      db.transaction(async (trx) => {
        const stored = await sessions.lock(id, trx)
        if (!stored) return
        await sessions.leave(id, actor.id, trx)
        if (!stored.endedAt) await passOn(stored, trx)
      }),
    step: (actor: Actor, id: string, isAway: boolean): Promise<void> =>
      db.transaction(async (trx) => {
        await live(id, trx)
        await sessions.step(id, actor.id, isAway, trx)
      }),
    /** The leader hands on; who opened the session, teachers and the owner may take the lead back. */
    lead: async (actor: Actor, held: Held, id: string, leaderId: string): Promise<Session> => {
      await db.transaction(async (trx) => {
        const stored = await live(id, trx)
        const people = await sessions.people(id, trx)
        if (!people.some((one) => one.id === leaderId && one.isHere))
          throw problem('invalid', { detail: 'Only somebody who is here can lead.' })
        const leaderIsHere = people.some((one) => one.id === stored.leaderId && one.isHere)
        const mayTake = held.has('author') || held.has('teacher') || held.has('owner') || !leaderIsHere
        if (stored.leaderId !== actor.id && !(mayTake && leaderId === actor.id)) throw problem('not-leading')
        if (held.has('listener') && leaderId === actor.id && leaderIsHere && stored.leaderId !== actor.id)
          throw problem('not-leading')
        await sessions.setLeader(id, leaderId, trx)
      })
      return whole(id, held)
    },
    change: (
      actor: Actor,
      id: string,
      change: Omit<z.infer<typeof TransportChange>, 'sessionId'>
    ): Promise<TransportState> =>
      db.transaction(async (trx) => {
        const stored = await live(id, trx)
        if (stored.leaderId !== actor.id) throw problem('not-leading')
        const transport = changedTransport(stored.transport, change, stored.takeDurationSec, now())
        await sessions.setTransport(id, transport, trx)
        return transport
      })
  }
}
export type SessionService = ReturnType<typeof createSessionService>

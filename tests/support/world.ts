// The things that the access matrices ask for, and, written by hand, how everybody stands to each of them.
import type { Relation } from '@shared/access/relations'
import type { TestApp } from './app.ts'
import {
  buildClip,
  buildComment,
  buildGroup,
  buildInvitation,
  buildLink,
  buildRecording,
  buildReply,
  buildSavedLoop,
  buildSession,
  buildTake,
  buildTune,
  demoGroup,
  newId,
  type TakeInput
} from './build.ts'
import { type AskerKey, askerKeys, otherGroup, type PersonKey } from './people.ts'

export type Standing = Partial<Record<PersonKey, Relation[]>>
export type Ids = Record<string, string>
export interface Target {
  label: string
  ids: Ids
  /** Who stands how; whoever is left out is a stranger to it. */
  standing: Standing
}

/** The relations of one asker to one thing, with those that everybody has. */
export const relationsTo = (standing: Standing, key: AskerKey): Relation[] => {
  if (key === 'anonymous') return ['anonymous']
  return ['stranger', ...(key === 'sten' ? (['operator'] as const) : []), ...(standing[key] ?? [])]
}

const inDemo: Standing = {
  mara: ['owner'],
  jory: ['teacher'],
  ines: ['member'],
  tomas: ['member'],
  pell: ['member'],
  wren: ['member'],
  aude: ['listener']
}
const inOther: Standing = { stranger: ['owner'], neighbour: ['member'] }

const plus = (standing: Standing, more: Standing): Standing => {
  const sum: Standing = {}
  for (const key of askerKeys) if (key !== 'anonymous') sum[key] = [...(standing[key] ?? []), ...(more[key] ?? [])]
  return sum
}

type Kind =
  | 'site'
  | 'group'
  | 'tune'
  | 'take'
  | 'savedLoop'
  | 'clip'
  | 'comment'
  | 'reply'
  | 'invitation'
  | 'link'
  | 'session'
  | 'recording'

interface TakeCase {
  label: string
  take: TakeInput
  /** Relations that come with hearing it, beside the role in the group. */
  hearing: Standing
  around: Standing
}

// mara teaches ines and wren, jory teaches tomas; jory and pell have not both agreed.
const takeCases: TakeCase[] = [
  { label: 'kept to ines', take: { by: 'ines', reach: 'only me' }, around: inDemo, hearing: { ines: ['takeOwner'] } },
  {
    label: 'for the teachers of ines',
    take: { by: 'ines', reach: 'my teachers' },
    around: inDemo,
    hearing: { ines: ['takeOwner'], mara: ['takeOwnersTeacher'] }
  },
  {
    label: 'for the teachers of pell, who has not agreed to one',
    take: { by: 'pell', reach: 'my teachers' },
    around: inDemo,
    hearing: { pell: ['takeOwner'] }
  },
  {
    label: 'of ines for tomas and aude by name',
    take: { by: 'ines', reach: 'named', named: ['tomas', 'aude'] },
    around: inDemo,
    hearing: { ines: ['takeOwner'], tomas: ['namedMember'], aude: ['namedListener'] }
  },
  {
    label: 'of ines for the group',
    take: { by: 'ines', reach: 'group', withMedia: true },
    around: inDemo,
    hearing: {
      ines: ['takeOwner'],
      mara: ['takeOwnersTeacher', 'hearer'],
      jory: ['hearer'],
      tomas: ['hearer'],
      pell: ['hearer'],
      wren: ['hearer'],
      aude: ['guestHearer']
    }
  },
  {
    label: 'of a minor for the group',
    take: { by: 'wren', reach: 'group' },
    around: inDemo,
    hearing: {
      wren: ['takeOwner'],
      mara: ['takeOwnersTeacher', 'hearer'],
      jory: ['hearer'],
      ines: ['hearer'],
      tomas: ['hearer'],
      pell: ['hearer']
    }
  },
  {
    label: 'of the group next door',
    take: { by: 'neighbour', groupId: otherGroup.id, reach: 'group' },
    around: inOther,
    hearing: { neighbour: ['takeOwner'], stranger: ['hearer'] }
  }
]

/** What is said about a take counts only for those who hear it. */
const amongHearers = (one: TakeCase, authors: PersonKey[]): Standing => {
  const standing: Standing = {}
  for (const [key, hearing] of Object.entries(one.hearing) as [PersonKey, Relation[]][])
    standing[key] = [...(one.around[key] ?? []), ...hearing, ...(authors.includes(key) ? (['author'] as const) : [])]
  return standing
}

const groupOf = (one: TakeCase): string => one.take.groupId ?? demoGroup.id
const everyMemberOf = (one: TakeCase): PersonKey[] => Object.keys(one.around) as PersonKey[]

/** Things that are not there or whose id is no id: nobody stands to them in any way. */
const nowhere = (name: string): Target[] => [
  { label: 'that does not exist', ids: { [name]: newId() }, standing: {} },
  { label: 'with an id that is none', ids: { [name]: 'no-such-id' }, standing: {} }
]

interface Case {
  label: string
  standing: Standing
  make(): Promise<Ids>
}

/** Every kind of thing: own and foreign ones, each made anew when asked for. */
export const targetCases = (app: Pick<TestApp, 'db' | 'storageDir'>): Record<Kind, Case[]> => {
  const take = (one: TakeCase) => buildTake(app, one.take)
  const inTake = (
    cases: TakeCase[],
    author: (one: TakeCase) => PersonKey,
    make: (takeId: string, by: PersonKey, one: TakeCase) => Promise<Ids>
  ): Case[] =>
    cases.map((one) => ({
      label: `on a take ${one.label}`,
      standing: amongHearers(one, [author(one)]),
      make: async () => make(await take(one), author(one), one)
    }))
  // Somebody of the group who does not hear it may once have spoken there: that counts for nothing any more.
  const speaker = (one: TakeCase): PersonKey => (everyMemberOf(one).includes('tomas') ? 'tomas' : 'stranger')
  return {
    site: [{ label: 'the site', standing: {}, make: async () => ({}) }],
    group: [
      { label: 'the demo group', standing: inDemo, make: async () => ({ groupId: await buildGroup(app) }) },
      {
        label: 'the group next door',
        standing: inOther,
        make: async () => ({ groupId: await buildGroup(app, { stranger: 'owner', neighbour: 'member' }) })
      }
    ],
    tune: [
      {
        label: 'a tune that ines added',
        standing: plus(inDemo, { ines: ['author'] }),
        make: async () => ({ tuneId: await buildTune(app) })
      },
      {
        label: 'a tune next door',
        standing: plus(inOther, { neighbour: ['author'] }),
        make: async () => ({ tuneId: await buildTune(app, { by: 'neighbour', groupId: otherGroup.id }) })
      }
    ],
    take: takeCases.map((one) => ({
      label: `a take ${one.label}`,
      standing: plus(one.around, one.hearing),
      make: async () => ({ takeId: await take(one) })
    })),
    savedLoop: inTake(takeCases, speaker, async (takeId, by) => ({
      savedLoopId: await buildSavedLoop(app, { takeId, by })
    })),
    clip: inTake(takeCases, speaker, async (takeId, by) => ({ clipId: await buildClip(app, { takeId, by }) })),
    comment: inTake(takeCases, speaker, async (takeId, by) => ({ commentId: await buildComment(app, { takeId, by }) })),
    reply: inTake(takeCases, speaker, async (takeId, by) => ({
      replyId: await buildReply(app, { commentId: await buildComment(app, { takeId, by: 'ines' }), by })
    })),
    session: inTake(
      takeCases,
      (one) => one.take.by ?? 'ines',
      async (takeId, by, one) => ({ sessionId: await buildSession(app, { takeId, groupId: groupOf(one), by }) })
    ),
    invitation: [
      {
        label: 'an invitation that jory made',
        standing: plus(inDemo, { jory: ['author'] }),
        make: async () => ({ invitationId: (await buildInvitation(app, { by: 'jory' })).id })
      },
      {
        label: 'an invitation next door',
        standing: plus(inOther, { stranger: ['author'] }),
        make: async () => ({
          invitationId: (await buildInvitation(app, { by: 'stranger', groupId: otherGroup.id })).id
        })
      }
    ],
    link: [
      {
        label: 'a link of jory and pell',
        standing: plus(inDemo, { jory: ['author'], pell: ['author'] }),
        make: async () => ({
          linkId: await buildLink(app, {
            groupId: await buildGroup(app),
            teacher: 'jory',
            student: 'pell',
            isAgreed: false
          })
        })
      },
      {
        label: 'a link next door',
        standing: plus(inOther, { stranger: ['author'], neighbour: ['author'] }),
        make: async () => ({
          linkId: await buildLink(app, {
            groupId: await buildGroup(app, { stranger: 'owner', neighbour: 'member' }),
            teacher: 'stranger',
            student: 'neighbour'
          })
        })
      }
    ],
    recording: [
      {
        label: 'a recording that ines is making',
        standing: { ines: ['author'] },
        make: async () => ({ recordingId: await buildRecording(app) })
      },
      {
        label: 'a recording next door',
        standing: { neighbour: ['author'] },
        make: async () => ({ recordingId: await buildRecording(app, { by: 'neighbour', groupId: otherGroup.id }) })
      }
    ]
  }
}

export type TargetKind = Kind
export const missing = (kind: Exclude<Kind, 'site'>): Target[] => nowhere(`${kind}Id`)

// What the same answers cost without the house around them: Express 5 and pg, nobody signed in, nothing checked.
import { createServer } from 'node:http'
import type { AddressInfo } from 'node:net'
import compression from 'compression'
import express from 'express'
import pg from 'pg'
import type { Comment } from '@shared/contracts/comments'
import { idOf } from '../support/people.ts'
import { serveQuestions } from './processes.ts'

export type BareQuestion =
  | { ask: 'place' }
  /** `like` is what the real server said: the abilities in it are repeated, not derived. */
  | { ask: 'comments'; databaseUrl: string; takeId: string; like: Comment[] }
  | { ask: 'file'; path: string }

type Row = Record<string, unknown> & { replies: Record<string, unknown>[] }

const wire = (column: string): string => `to_char(${column} at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"')`
const query = `
  select c.id, c.take_id, c.author_id, author.name as author_name, c.kind, c.text, c.start_sec, c.end_sec,
    c.settled_by, settler.name as settler_name, c.settled_at, c.created_at, c.updated_at,
    coalesce((
      select json_agg(json_build_object('id', r.id, 'author_id', r.author_id, 'author_name', u.name, 'text', r.text,
        'created_at', ${wire('r.created_at')}, 'updated_at', ${wire('r.updated_at')}) order by r.created_at, r.id)
      from replies r join users u on u.id = r.author_id where r.comment_id = c.id), '[]') as replies
  from comments c join users author on author.id = c.author_id left join users settler on settler.id = c.settled_by
  where c.take_id = $1 order by c.start_sec, c.created_at, c.id`

const caseOf = (kind: string, authorId: string): string => `${kind} ${authorId === idOf('ines')}`

/** Abilities by kind and authorship, read from what the real server said. */
const abilitiesIn = (like: readonly Comment[]) => {
  const seen = new Map<string, string[]>()
  for (const comment of like) {
    seen.set(caseOf(comment.kind, comment.author.id), comment.abilities)
    for (const reply of comment.replies) seen.set(caseOf('reply', reply.author.id), reply.abilities)
  }
  return seen
}

const app = express()
let path = ''
app.get('/empty', (_req, res) => {
  res.type('html').send('<!doctype html><title>Empty</title><body style="height:100vh"></body>')
})
app.get('/file', (_req, res) => {
  res.sendFile(path, { dotfiles: 'allow' })
})
const http = createServer(app)

const serveComments = ({ databaseUrl, takeId, like }: Extract<BareQuestion, { ask: 'comments' }>): void => {
  const pool = new pg.Pool({ connectionString: databaseUrl })
  pool.on('error', () => undefined)
  const abilities = abilitiesIn(like)
  const personOf = (id: unknown, name: unknown) => (id === null ? null : { id, name })
  const handler: express.RequestHandler = async (_req, res) => {
    const { rows } = await pool.query<Row>(query, [takeId])
    const items = rows.map((row) => ({
      id: row['id'],
      takeId: row['take_id'],
      author: personOf(row['author_id'], row['author_name']),
      kind: row['kind'],
      text: row['text'],
      startSec: row['start_sec'],
      endSec: row['end_sec'],
      isOpen: (row['kind'] === 'question' || row['kind'] === 'to fix') && row['settled_at'] === null,
      settledBy: personOf(row['settled_by'], row['settler_name']),
      settledAt: row['settled_at'],
      createdAt: row['created_at'],
      updatedAt: row['updated_at'],
      replies: row.replies.map((reply) => ({
        id: reply['id'],
        commentId: row['id'],
        author: personOf(reply['author_id'], reply['author_name']),
        text: reply['text'],
        createdAt: reply['created_at'],
        updatedAt: reply['updated_at'],
        abilities: abilities.get(caseOf('reply', String(reply['author_id'])))
      })),
      abilities: abilities.get(caseOf(String(row['kind']), String(row['author_id'])))
    }))
    res.json({ items })
  }
  app.get('/comments', handler)
  app.get('/comments-packed', compression(), handler)
}

serveQuestions<object, BareQuestion>(async (question) => {
  switch (question.ask) {
    case 'place':
      await new Promise<void>((listening) => http.listen(0, '127.0.0.1', listening))
      return `http://127.0.0.1:${(http.address() as AddressInfo).port}`
    case 'comments':
      serveComments(question)
      return null
    case 'file':
      path = question.path
      return null
  }
})

// One GET over a connection that stays open, timed.
import { Agent, request } from 'node:http'

const agent = new Agent({ keepAlive: true, maxSockets: 16 })

export interface Got {
  status: number
  body: Buffer
  headers: NodeJS.Dict<string | string[]>
  /** Until the last byte, ms. */
  ms: number
  /** Until the head of the answer, ms. */
  headMs: number
}

export const get = (url: string, headers: Record<string, string> = {}): Promise<Got> =>
  new Promise((done, fail) => {
    const began = performance.now()
    const asked = request(url, { agent, headers }, (answer) => {
      const headMs = performance.now() - began
      const chunks: Buffer[] = []
      answer.on('data', (chunk: Buffer) => chunks.push(chunk))
      answer.on('error', fail)
      answer.on('end', () => {
        const ms = performance.now() - began
        done({ status: answer.statusCode ?? 0, body: Buffer.concat(chunks), headers: answer.headers, ms, headMs })
      })
    })
    asked.on('error', fail)
    asked.end()
  })

/** Of an answer that must be as expected. */
export const mustGet = async (url: string, status: number, headers: Record<string, string> = {}): Promise<Got> => {
  const got = await get(url, headers)
  if (got.status !== status) throw new Error(`${url}: ${got.status} ${got.body.toString('utf8', 0, 300)}`)
  return got
}

// The comments of a take through the whole house, beside one query and res.json.
import { addressOf } from '@shared/contracts/route'
import { type Comment, commentRoutes } from '@shared/contracts/comments'
import { mustGet } from './get.ts'
import { alone, compared, comparedAt, type Figure } from './report.ts'
import { spending, type Stage } from './stage.ts'
import { inPairs } from './statistics.ts'

const comments = 100
const pairs = 120
const warmUp = 30

export const commentFigures = async (stage: Stage): Promise<Figure[]> => {
  const real = await stage.real()
  const bare = await stage.bare()
  const takeId = await real.ask<string>({ ask: 'take with comments', comments })
  const url = real.url + addressOf(commentRoutes.list, { params: { takeId } })
  const signedIn = { Cookie: real.cookie }
  const wanted = (await mustGet(url, 200, signedIn)).body
  const { items: like } = JSON.parse(wanted.toString()) as { items: Comment[] }
  await bare.ask({ ask: 'comments', databaseUrl: real.databaseUrl, takeId, like })
  const peerUrl = `${bare.url}/comments`
  const said = (await mustGet(peerUrl, 200)).body
  if (!said.equals(wanted))
    throw new Error(`The bare handler says something else:\n${said.toString()}\n${wanted.toString()}`)

  const plain = () => mustGet(url, 200, signedIn).then(({ ms }) => ms)
  const plainPeer = () => mustGet(peerUrl, 200).then(({ ms }) => ms)
  const packed = () => mustGet(url, 200, { ...signedIn, 'Accept-Encoding': 'gzip, br' }).then(({ ms }) => ms)
  const packedPeer = () => mustGet(`${peerUrl}-packed`, 200, { 'Accept-Encoding': 'gzip, br' }).then(({ ms }) => ms)
  await inPairs(warmUp, plain, plainPeer)
  const spent = await spending(real, bare)
  const plainMs = await inPairs(pairs, plain, plainPeer)
  const cpuMs = await spent()
  await inPairs(warmUp, packed, packedPeer)
  const packedMs = await inPairs(pairs, packed, packedPeer)

  await real.ask({ ask: 'count statements' })
  const counted = 5
  for (let i = 0; i < counted; i += 1) await plain()
  const statements = await real.ask<string[]>({ ask: 'statements' })

  const what = `${comments} comments with ${like.flatMap(({ replies }) => replies).length} answers, ${wanted.length} bytes, signed in, ${pairs} pairs of requests, one at a time; peer: Express 5 + pg, one query, no sign-in, the same bytes`
  const packedWhat = `${what}; both through the compression package, as a browser asks`
  return [
    compared('p50', 'ms', plainMs, what),
    comparedAt(0.95, 'p95', 'ms', plainMs, what),
    compared(
      "the server's processor time a request",
      'ms',
      { ours: [cpuMs.ours / pairs], peer: [cpuMs.peer / pairs] },
      `${what}; of the node process alone, which other load hardly moves`
    ),
    compared('p50, packed', 'ms', packedMs, packedWhat),
    comparedAt(0.95, 'p95, packed', 'ms', packedMs, packedWhat),
    {
      ...alone('SQL statements a request', '', statements.length / counted, 'counted in pg itself over 5 requests', [
        ...new Set(statements)
      ]),
      peer: 1,
      ratio: statements.length / counted
    }
  ]
}

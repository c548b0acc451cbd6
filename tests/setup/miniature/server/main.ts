// The least that start expects of the server.
import http from 'node:http'

const { PORT = '', HOST = '' } = process.env
if (PORT === 'faulty') process.exit(78)
const server = http.createServer((_request, response) => response.end('well'))
server.listen(Number(PORT), HOST, () => process.send?.({ type: 'listening', address: `http://${HOST}:${PORT}` }))
process.on('disconnect', () => process.exit(0))

// Wants the system's programs of the given names there.
import { ensurePrograms } from '../../../server/setup/debian.mjs'
import { report } from '../../../server/setup/say.mjs'

process.exitCode = await ensurePrograms(process.argv.slice(2)).then(() => 0, report)

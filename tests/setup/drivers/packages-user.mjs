// Wants the packages of the project it was copied into there.
import { ensurePackages } from '../../../server/setup/packages.mjs'
import { report } from '../../../server/setup/say.mjs'

process.exitCode = await ensurePackages().then(() => 0, report)

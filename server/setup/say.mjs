/** A failure that a sentence explains well enough; a stack would only hide it. */
export class Trouble extends Error {
  /** @param {string} sentence @param {number} [exitCode] */
  constructor(sentence, exitCode = 1) {
    super(sentence)
    this.exitCode = exitCode
  }
}

/** Progress goes to stderr where stdout belongs to a command's result. @param {string} line */
export const note = (line) => process.stderr.write(`${line}\n`)

/** @param {unknown} error @returns {number} the code to exit with */
export const report = (error) => {
  if (error instanceof Trouble) {
    note(error.message)
    return error.exitCode
  }
  note(error instanceof Error ? (error.stack ?? error.message) : String(error))
  return 1
}

/** Stops with a sentence on a Node that is too old to run the rest. */
export const checkNode = () => {
  const [major = 0, minor = 0] = process.versions.node.split('.').map(Number)
  if (major > 20 || (major === 20 && minor >= 12)) return
  throw new Trouble(`Plumbline needs Node 20.12 or newer; this is ${process.versions.node}.`)
}

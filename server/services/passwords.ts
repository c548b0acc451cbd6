// argon2id at the weight OWASP's password storage cheat sheet names for it: 19 MiB, two passes (ASVS V6.2, V11.4).
import { hash, verify } from '@node-rs/argon2'
import { commonPasswords } from '@server/services/common-passwords'

const weight = { memoryCost: 19_456, timeCost: 2, parallelism: 1 }

export const hashPassword = (password: string): Promise<string> => hash(password, weight)
export const isPassword = (stored: string, password: string): Promise<boolean> => verify(stored, password)

let decoy: Promise<string> | null = null
/** Spends the same time as a real check, so that an unknown address answers no sooner (ASVS V6.3.8). Always false. */
export const checkNobody = async (password: string): Promise<false> => {
  decoy ??= hashPassword('nobody has this one')
  await isPassword(await decoy, password)
  return false
}

/** A sentence where a password is one of those tried first, else null. */
export const passwordFault = (password: string): string | null =>
  commonPasswords.has(password.toLowerCase())
    ? 'This password is one of those tried first by strangers. Take another.'
    : null

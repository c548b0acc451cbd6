// The passwords tried first by strangers (ASVS V6.2.4 wants the top 3,000): the list that comes with zxcvbn-ts (MIT).
import { dictionary } from '@zxcvbn-ts/language-common'

const tooShortAnyway = 8
export const commonPasswords: ReadonlySet<string> = new Set(
  dictionary['passwords-common']
    .filter((word) => String(word).length >= tooShortAnyway)
    .map((word) => String(word).toLowerCase())
)

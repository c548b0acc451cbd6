// Stands in for zod in the browser (vite.config.ts). It would try whether it may make functions from text as soon as the
// first schema is declared, and the content security policy would report that.
import { config } from 'zod/v4'

config({ jitless: true })

export * from 'zod/v4'

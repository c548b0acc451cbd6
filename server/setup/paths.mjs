import path from 'node:path'
import { fileURLToPath } from 'node:url'

/** The project's folder, whatever the folder the command was typed in. */
export const root = path.resolve(path.dirname(fileURLToPath(import.meta.url)), '../..')

/** Database, uploads and build: `STORAGE_DIR`, read relative to the project, or `storage`. */
export const storageFolder = () => path.resolve(root, process.env.STORAGE_DIR || 'storage')

/** @param {string} script a file inside a package, such as `vite/bin/vite.js` */
export const packageFile = (script) => path.join(root, 'node_modules', script)

/** Arguments for node that run a TypeScript file. */
export const typescript = (/** @type {string} */ file) => ['--import', 'tsx', path.join(root, file)]

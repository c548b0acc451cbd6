// Multipart to disk through multer, into a folder of its own with a name of ours; the size is held to while it streams.
import { mkdir, rm } from 'node:fs/promises'
import { randomUUID } from 'node:crypto'
import { join } from 'node:path'
import type { Request, Response } from 'express'
import multer from 'multer'
import type { RouteDef } from '@shared/contracts/route'
import { problem } from '@shared/errors/problems'
import type { UploadedFile } from '@server/http/handlers'

export interface Received {
  fields: Record<string, unknown>
  file: UploadedFile
  /** Takes away whatever is left in the upload's folder. */
  discard(wasKept: boolean): Promise<void>
}

export type Receiver = (req: Request, res: Response, def: RouteDef) => Promise<Received>

export const createReceiver =
  (incomingDir: string, maxBytes: number): Receiver =>
  async (req, res, def) => {
    const folder = join(incomingDir, randomUUID())
    await mkdir(folder, { recursive: true })
    const discard = () => rm(folder, { recursive: true, force: true })
    try {
      const upload = multer({
        storage: multer.diskStorage({
          destination: folder,
          filename: (_req, _file, named) => named(null, 'recording')
        }),
        limits: { fileSize: Math.min(def.maxBytes ?? 0, maxBytes), files: 1, fields: 20, fieldSize: 10_000, parts: 30 }
      }).single(def.fileField ?? 'file')
      await new Promise<void>((done, fail) => {
        // A person who cancels leaves a half-sent body: multer then never calls back.
        req.once('aborted', () => fail(problem('bad-request', { detail: 'The upload was broken off.' })))
        upload(req, res, (error: unknown) => (error ? fail(error) : done()))
      })
      if (!req.file)
        throw problem('invalid', {
          errors: [{ in: 'file', path: def.fileField ?? 'file', message: 'Choose a recording.' }]
        })
      return { fields: { ...(req.body as object) }, file: { path: req.file.path, bytes: req.file.size }, discard }
    } catch (error) {
      await discard()
      throw error
    }
  }

import { mkdirSync, readdirSync, utimesSync, writeFileSync } from 'node:fs'
import { join, resolve, sep } from 'node:path'
import { buffer } from 'node:stream/consumers'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { storageError, StorageFull } from '@server/media/faults.ts'
import { createLocalStorage, resolveInside } from '@server/media/storage.ts'
import { makeWorkFolder, sweepOrphans } from '@server/media/work-folder.ts'
import { scratchFolder } from '../support/media.ts'

const take = '0b9f3c52-53c5-4d0a-9f63-6a1d2f0e7c11'

describe('resolveInside', () => {
  it('never leaves the folder, whatever the parts are', () => {
    const part = fc.oneof(
      fc.string(),
      fc.constantFrom('..', '.', '../..', '/etc', 'a/../../b', '%2e%2e%2f', '..\\..', 'a\0b', '')
    )
    fc.assert(
      fc.property(fc.array(part, { maxLength: 5 }), (parts) => {
        const path = resolveInside('/srv/takes', ...parts)
        if (path !== undefined) expect(path.startsWith(`/srv/takes${sep}`)).toBe(true)
      })
    )
  })

  it.each([['../x'], ['/etc/passwd'], ['a\0'], ['a\\b'], ['a/../..'], ['']])('refuses %j', (part) => {
    expect(resolveInside('/srv/takes', part)).toBeUndefined()
  })

  it('keeps ordinary names', () => {
    expect(resolveInside('/srv/takes', 'a', 'b.ogg')).toBe(resolve('/srv/takes/a/b.ogg'))
  })
})

describe('createLocalStorage', () => {
  const withUpload = async () => {
    const root = scratchFolder()
    const storage = createLocalStorage(root)
    const upload = join(await storage.incomingFolder(), 'upload-1')
    writeFileSync(upload, 'abcdefghij')
    return { root, storage, upload }
  }

  it('takes an upload over and serves any range of it', async () => {
    const { storage, upload } = await withUpload()
    expect(await storage.keepOriginal(take, upload)).toEqual({ bytes: 10 })
    expect(readdirSync(await storage.incomingFolder())).toEqual([])
    const file = await storage.find(take, { kind: 'original' })
    expect(file?.bytes).toBe(10)
    expect(file && (await buffer(file.read())).toString()).toBe('abcdefghij')
    expect(file && (await buffer(file.read({ start: 2, end: 5 }))).toString()).toBe('cde')
    expect(await storage.bytesOf(take)).toBe(10)
  })

  it('changes the tag when the content changes', async () => {
    const { storage, upload } = await withUpload()
    await storage.keepOriginal(take, upload)
    const before = await storage.find(take, { kind: 'original' })
    writeFileSync(upload, 'klmnopqrst')
    await storage.keepOriginal(take, upload)
    expect((await storage.find(take, { kind: 'original' }))?.tag).not.toBe(before?.tag)
  })

  it('finds renditions, peaks and pieces where an ingest puts them, and nothing that is not there', async () => {
    const { storage } = await withUpload()
    const { outDir } = storage.ingestPaths(take)
    mkdirSync(join(outDir, 'pieces'), { recursive: true })
    for (const name of ['rendition.m4a', 'peaks.bin', 'pieces/00007.ogg']) writeFileSync(join(outDir, name), name)
    const textOf = async (part: Parameters<typeof storage.find>[1]) => {
      const file = await storage.find(take, part)
      return file && (await buffer(file.read())).toString()
    }
    expect(await textOf({ kind: 'rendition' })).toBe('rendition.m4a')
    expect(await textOf({ kind: 'peaks' })).toBe('peaks.bin')
    expect(await textOf({ kind: 'piece', piece: 7 })).toBe('pieces/00007.ogg')
    for (const piece of [8, -1, Number.NaN, Infinity, 1e30])
      expect(await textOf({ kind: 'piece', piece })).toBeUndefined()
  })

  it('knows takes by their id only', async () => {
    const { storage, upload } = await withUpload()
    for (const id of ['..', '', `${take}/..`, `../${take}`, `${take}\0`, take.toUpperCase(), `${take}\n`]) {
      expect(await storage.find(id, { kind: 'original' }), id).toBeUndefined()
      await expect(storage.keepOriginal(id, upload)).rejects.toThrow('Not a take id')
      expect(() => storage.ingestPaths(id)).toThrow('Not a take id')
    }
  })

  it('removes all of a take, also what was begun, and nothing of another', async () => {
    const { root, storage, upload } = await withUpload()
    const other = '7c5e1c0a-1111-4d0a-9f63-6a1d2f0e7c11'
    await storage.keepOriginal(take, upload)
    writeFileSync(upload, 'x')
    await storage.keepOriginal(other, upload)
    await makeWorkFolder(join(root, 'takes', take))
    await storage.removeTake(take)
    expect(readdirSync(join(root, 'takes'))).toEqual([other])
  })

  it('sweeps uploads that went stale and work of dead processes, and leaves living work alone', async () => {
    const { root, storage, upload } = await withUpload()
    await storage.keepOriginal(take, upload)
    const folder = join(root, 'takes', take)
    const living = await makeWorkFolder(folder)
    const dead = join(folder, `.work-${process.pid}-1-${'0'.repeat(32)}`)
    mkdirSync(join(dead, 'pieces'), { recursive: true })
    const incoming = await storage.incomingFolder()
    writeFileSync(join(incoming, 'old'), '')
    writeFileSync(join(incoming, 'new'), '')
    const now = Date.now()
    utimesSync(join(incoming, 'old'), (now - 100_000) / 1000, (now - 100_000) / 1000)
    expect(await storage.sweep(now, 50_000)).toBe(2)
    expect(readdirSync(incoming)).toEqual(['new'])
    expect(readdirSync(folder).sort()).toEqual([living.split('/').at(-1), 'original'])
  })
})

describe('sweepOrphans', () => {
  it('touches nothing that is not named like work', async () => {
    const folder = scratchFolder()
    for (const name of ['media', 'original', '.work', '.work-1-2-short', `.work-1-1-${'z'.repeat(32)}`])
      mkdirSync(join(folder, name))
    expect(await sweepOrphans(folder)).toBe(0)
    expect(await sweepOrphans(join(folder, 'missing'))).toBe(0)
    expect(readdirSync(folder)).toHaveLength(5)
  })
})

describe('storageError', () => {
  it('tells a full disk from other faults', () => {
    expect(storageError(Object.assign(new Error('write'), { code: 'ENOSPC' }))).toBeInstanceOf(StorageFull)
    expect(storageError(Object.assign(new Error('write'), { code: 'EDQUOT' }))).toBeInstanceOf(StorageFull)
    const other = Object.assign(new Error('write'), { code: 'EACCES' })
    expect(storageError(other)).toBe(other)
  })
})

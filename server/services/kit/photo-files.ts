import { createReadStream, existsSync } from 'node:fs'
import { mkdir, readdir, rename, rm, stat, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import type { Deps } from '../../deps.ts'
import type { RedrawnPhoto } from './photo-image.ts'

export type PhotoSize = 'thumb' | 'full'

/** Each domain keeps its photos apart, so that a sweep of one never takes another's. */
export type PhotoAlbum = 'kit' | 'yeast'

const folder = (deps: Deps, album: PhotoAlbum) => join(deps.uploadsDir, album)
const pathOf = (deps: Deps, name: string, size: PhotoSize, album: PhotoAlbum) =>
  join(folder(deps, album), `${name}.${size}.webp`)

/** Puts both sizes on disk, each under a name nobody chose; a half-written file never has its final name. */
export async function keepPhotoFiles(
  deps: Deps,
  name: string,
  photo: RedrawnPhoto,
  album: PhotoAlbum = 'kit',
) {
  await mkdir(folder(deps, album), { recursive: true, mode: 0o700 })
  for (const size of ['full', 'thumb'] as const) {
    const path = pathOf(deps, name, size, album)
    await writeFile(`${path}.part`, photo[size], { mode: 0o600 })
    await rename(`${path}.part`, path)
  }
}

/** Takes a photo's files away, whole or half-written. */
export async function dropPhotoFiles(deps: Deps, name: string, album: PhotoAlbum = 'kit') {
  for (const size of ['full', 'thumb'] as const) {
    const path = pathOf(deps, name, size, album)
    await rm(path, { force: true })
    await rm(`${path}.part`, { force: true })
  }
}

/** Undefined when the file has gone. */
export function openPhotoFile(deps: Deps, name: string, size: PhotoSize, album: PhotoAlbum = 'kit') {
  const path = pathOf(deps, name, size, album)
  return existsSync(path) ? createReadStream(path) : undefined
}

/** Files that no row names and that are older than an hour, as names of photos. */
export async function strayPhotoFiles(
  deps: Deps,
  known: ReadonlySet<string>,
  nowMs: number,
  album: PhotoAlbum = 'kit',
): Promise<string[]> {
  const files = await readdir(folder(deps, album)).catch(() => [] as string[])
  const strays = new Set<string>()
  for (const file of files) {
    const name = /^([\w-]+)\.(?:full|thumb)\.webp(?:\.part)?$/.exec(file)?.[1]
    if (name === undefined || known.has(name)) continue
    const { mtimeMs } = await stat(join(folder(deps, album), file))
    if (nowMs - mtimeMs > 3_600_000) strays.add(name)
  }
  return [...strays]
}

import { count, eq } from 'drizzle-orm'
import { type ItemPhoto, PHOTOS_PER_ITEM } from '#shared/kit/photo-contract'
import { itemPhotos } from '../../db/schema/kit.ts'
import { write, type Db, type Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError, notFound } from '../../errors.ts'
import type { FileReply } from '../../http/serve.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { newId } from '../../ids.ts'
import { addItemEvent } from './item-events.ts'
import { itemIdOf } from './item-rows.ts'
import {
  dropPhotoFiles,
  keepPhotoFiles,
  openPhotoFile,
  strayPhotoFiles,
  type PhotoSize,
} from './photo-files.ts'
import { redrawPhoto } from './photo-image.ts'
import { inTurn } from './photo-queue.ts'

/**
 * Adds a photo to an item: files first, then the row; if the row does not come to be, the files go again.
 * @throws AppError `not-found`, `over-limit`, and what {@link redrawPhoto} throws
 */
export async function addPhoto(
  deps: Deps,
  user: Pick<SignedIn, 'id' | 'name'>,
  idOrTag: string,
  bytes: Buffer,
): Promise<ItemPhoto> {
  const itemId = itemIdOf(deps.db, idOrTag)
  refuseFullAlbum(deps.db, itemId)
  const photo = await inTurn(() => redrawPhoto(bytes))
  const fileName = `${newId()}${newId()}`
  const now = deps.clock.now()
  const row = {
    id: newId(),
    itemId,
    fileName,
    widthPx: photo.widthPx,
    heightPx: photo.heightPx,
    fullBytes: photo.full.length,
    thumbBytes: photo.thumb.length,
    addedBy: user.id,
    addedAt: now,
  }
  try {
    await keepPhotoFiles(deps, fileName, photo)
    write(deps.db, (tx) => {
      refuseFullAlbum(tx, itemId)
      tx.insert(itemPhotos).values(row).run()
      addItemEvent(tx, { itemId, event: 'photo-added', actorId: user.id, happenedAt: now, aboutId: row.id })
    })
  } catch (error) {
    await dropPhotoFiles(deps, fileName)
    throw error
  }
  return { ...row, addedByName: user.name }
}

function refuseFullAlbum(db: Db | Tx, itemId: string) {
  const album = db.select({ photos: count() }).from(itemPhotos).where(eq(itemPhotos.itemId, itemId)).get()
  if (album && album.photos >= PHOTOS_PER_ITEM)
    throw new AppError('over-limit', `It has ${PHOTOS_PER_ITEM} photos already. Remove one first.`)
}

/** @throws AppError `not-found`, also when the file has gone from the disk */
export function readPhoto(deps: Deps, id: string, size: PhotoSize): FileReply {
  const row = deps.db.select().from(itemPhotos).where(eq(itemPhotos.id, id)).get()
  const body = row && openPhotoFile(deps, row.fileName, size)
  if (!row || !body) throw notFound('That photo')
  return {
    body,
    type: 'image/webp',
    etag: `"${row.fileName}-${size}"`,
    cacheControl: 'private, max-age=86400, immutable',
  }
}

/** The row goes first: a file without a row is swept later, a row without a file would show a hole. */
export async function removePhoto(deps: Deps, user: Pick<SignedIn, 'id'>, id: string) {
  const row = deps.db.select().from(itemPhotos).where(eq(itemPhotos.id, id)).get()
  if (!row) throw notFound('That photo')
  write(deps.db, (tx) => {
    tx.delete(itemPhotos).where(eq(itemPhotos.id, id)).run()
    addItemEvent(tx, {
      itemId: row.itemId,
      event: 'photo-removed',
      actorId: user.id,
      happenedAt: deps.clock.now(),
      aboutId: id,
    })
  })
  await dropPhotoFiles(deps, row.fileName)
}

/** Removes files that belong to no photo, left by a crash between writing and recording; run by the daily sweep. */
export async function sweepPhotoFiles(deps: Deps): Promise<number> {
  const known = new Set(
    deps.db
      .select({ name: itemPhotos.fileName })
      .from(itemPhotos)
      .all()
      .map((row) => row.name),
  )
  const strays = await strayPhotoFiles(deps, known, Date.parse(deps.clock.now()))
  for (const name of strays) await dropPhotoFiles(deps, name)
  return strays.length
}

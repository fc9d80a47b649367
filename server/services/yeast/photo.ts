import { eq, isNotNull } from 'drizzle-orm'
import type { Packet } from '#shared/yeast/contract'
import { packets } from '../../db/schema/yeast.ts'
import { write, type Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { notFound } from '../../errors.ts'
import type { FileReply } from '../../http/serve.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { newId } from '../../ids.ts'
import {
  dropPhotoFiles,
  keepPhotoFiles,
  openPhotoFile,
  strayPhotoFiles,
  type PhotoSize,
} from '../kit/photo-files.ts'
import { redrawPhoto } from '../kit/photo-image.ts'
import { inTurn } from '../kit/photo-queue.ts'
import { packetReply, visiblePacket } from './fridge.ts'
import { changeablePacket } from './packets.ts'

/** Puts a photo to a packet, in place of the one before. */
export async function addPacketPhoto(
  deps: Deps,
  user: SignedIn,
  packetId: string,
  bytes: Buffer,
): Promise<Packet> {
  changeablePacket(deps.db, user, packetId)
  const photo = await inTurn(() => redrawPhoto(bytes))
  const photoName = `${newId()}${newId()}`
  await keepPhotoFiles(deps, photoName, photo, 'yeast')
  const before = write(deps.db, (tx) => setPhoto(deps, tx, user, packetId, photoName))
  if (before) await dropPhotoFiles(deps, before, 'yeast')
  return packetReply(visiblePacket(deps.db, user.id, packetId), user, deps.clock.today())
}

export async function removePacketPhoto(deps: Deps, user: SignedIn, packetId: string) {
  const before = write(deps.db, (tx) => setPhoto(deps, tx, user, packetId, null))
  if (!before) throw notFound('That photo')
  await dropPhotoFiles(deps, before, 'yeast')
}

/** Gives back the name of the photo that was there. */
function setPhoto(deps: Deps, tx: Tx, user: SignedIn, packetId: string, photoName: string | null) {
  const { packet } = changeablePacket(tx, user, packetId)
  tx.update(packets)
    .set({ photoName, updatedAt: deps.clock.now(), version: packet.version + 1 })
    .where(eq(packets.id, packetId))
    .run()
  return packet.photoName
}

/** @throws AppError `not-found`, also when the file has gone from the disk */
export function readPacketPhoto(deps: Deps, user: SignedIn, packetId: string, size: PhotoSize): FileReply {
  const { packet } = visiblePacket(deps.db, user.id, packetId)
  const body = packet.photoName ? openPhotoFile(deps, packet.photoName, size, 'yeast') : undefined
  if (!body) throw notFound('That photo')
  return {
    body,
    type: 'image/webp',
    etag: `"${packet.photoName}-${size}"`,
    cacheControl: 'private, no-cache',
  }
}

/** Removes files of photos that no packet has, left by a crash between writing and recording. */
export async function sweepPacketPhotos(deps: Deps) {
  const rows = deps.db
    .select({ name: packets.photoName })
    .from(packets)
    .where(isNotNull(packets.photoName))
    .all()
  const known = new Set(rows.flatMap(({ name }) => name ?? []))
  const strays = await strayPhotoFiles(deps, known, Date.parse(deps.clock.now()), 'yeast')
  for (const name of strays) await dropPhotoFiles(deps, name, 'yeast')
}

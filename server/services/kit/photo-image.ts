import { fileTypeFromBuffer } from 'file-type'
import sharp from 'sharp'
import {
  PHOTO_FULL_PX,
  PHOTO_MAX_PIXELS,
  PHOTO_THUMB_MAX_BYTES,
  PHOTO_THUMB_PX,
  PHOTO_TYPES,
} from '#shared/kit/photo-contract'
import { AppError } from '../../errors.ts'

// Decoders for what we take, and no other: each one more is one more to attack.
sharp.block({ operation: ['VipsForeignLoad'] })
sharp.unblock({
  operation: ['VipsForeignLoadJpegBuffer', 'VipsForeignLoadPngBuffer', 'VipsForeignLoadWebpBuffer'],
})
sharp.cache(false)
sharp.concurrency(1)

export interface RedrawnPhoto {
  full: Buffer
  thumb: Buffer
  widthPx: number
  heightPx: number
}

/**
 * Draws a photo anew as WebP, upright, without anything the camera noted, and a small one beside it.
 * @throws AppError `wrong-media-type`, `too-large`, or `invalid` for a file that breaks off
 */
export async function redrawPhoto(bytes: Buffer): Promise<RedrawnPhoto> {
  const type = await fileTypeFromBuffer(bytes)
  if (!PHOTO_TYPES.some((mime) => mime === type?.mime))
    throw new AppError('wrong-media-type', 'Choose a photo: JPEG, PNG or WebP.')
  const size = await readable(() => sharp(bytes, { limitInputPixels: false }).metadata())
  if (size.width * size.height > PHOTO_MAX_PIXELS)
    throw new AppError('too-large', 'That picture has more than 40 megapixels. Make it smaller first.')
  const { data, info } = await readable(() =>
    sharp(bytes, { limitInputPixels: PHOTO_MAX_PIXELS, failOn: 'truncated' })
      .autoOrient()
      .resize({ width: PHOTO_FULL_PX, height: PHOTO_FULL_PX, fit: 'inside', withoutEnlargement: true })
      .webp({ quality: 82, effort: 3 })
      .timeout({ seconds: 20 })
      .toBuffer({ resolveWithObject: true }),
  )
  return { full: data, thumb: await thumbOf(data), widthPx: info.width, heightPx: info.height }
}

/** The best quality that keeps it under its limit. */
async function thumbOf(full: Buffer): Promise<Buffer> {
  for (const [quality, px] of [
    [72, PHOTO_THUMB_PX],
    [50, PHOTO_THUMB_PX],
    [25, PHOTO_THUMB_PX],
    [25, PHOTO_THUMB_PX / 2],
  ] as const) {
    const thumb = await sharp(full)
      .resize({ width: px, height: px, fit: 'inside', withoutEnlargement: true })
      .webp({ quality })
      .toBuffer()
    if (thumb.length <= PHOTO_THUMB_MAX_BYTES) return thumb
  }
  throw new AppError('invalid', 'That picture cannot be made small enough. Choose another.')
}

async function readable<T>(decode: () => Promise<T>): Promise<T> {
  try {
    return await decode()
  } catch {
    const message = 'That picture could not be read to its end. Choose another.'
    throw new AppError('invalid', message, { errors: [{ path: 'photo', message }] })
  }
}

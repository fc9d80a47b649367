import { z } from 'zod'
import { endpoint } from '../http/endpoint.ts'
import { Id } from '../http/fields.ts'
import { Instant } from '../time/instant.ts'

/** Photos an item may have at once. */
export const PHOTOS_PER_ITEM = 12
/** Larger pictures are refused before they are decoded. */
export const PHOTO_MAX_PIXELS = 40_000_000
export const PHOTO_FULL_PX = 2048
export const PHOTO_THUMB_PX = 320
export const PHOTO_THUMB_MAX_BYTES = 20 * 1024
export const PHOTO_TYPES = ['image/jpeg', 'image/png', 'image/webp'] as const

export const ItemPhoto = z.object({
  id: Id,
  itemId: Id,
  widthPx: z.int(),
  heightPx: z.int(),
  addedByName: z.string(),
  addedAt: Instant,
})
export type ItemPhoto = z.output<typeof ItemPhoto>

export const photoEndpoints = {
  addPhoto: endpoint({
    method: 'POST',
    path: '/items/:id/photos',
    access: 'steward',
    summary:
      'Adds a photo of an item: JPEG, PNG or WebP, at most 8 MiB. It is redrawn, and what the camera noted is dropped.',
    params: z.object({ id: Id }),
    upload: 'photo',
    status: 201,
    reply: ItemPhoto,
    creates: 'async',
  }),
  getPhoto: endpoint({
    method: 'GET',
    path: '/photos/:id',
    access: 'member',
    summary: 'A photo as WebP.',
    params: z.object({ id: Id }),
    query: z.object({ size: z.enum(['thumb', 'full']).default('full') }),
    reply: null,
    file: 'image/webp',
  }),
  removePhoto: endpoint({
    method: 'DELETE',
    path: '/photos/:id',
    access: 'steward',
    summary: 'Removes a photo for good.',
    params: z.object({ id: Id }),
    status: 204,
    reply: null,
  }),
}

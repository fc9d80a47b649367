import { createHash, randomBytes } from 'node:crypto'

/** An opaque id: 96 random bits. */
export const newId = () => randomBytes(12).toString('base64url')

/** A secret for a link: 256 random bits. Only its digest is stored. */
export const newToken = () => randomBytes(32).toString('base64url')

export const digest = (text: string) => createHash('sha256').update(text).digest('base64url')

import express, { type RequestHandler } from 'express'
import { AppError } from '../errors.ts'

const parse = express.json({ limit: '100kb', type: 'application/json', strict: true })

/** JSON bodies only, unless the request carries a file (a bare CSV is read by the endpoint that takes it); anything else is 415. */
export const jsonBodies: RequestHandler = (req, res, next) => {
  const hasBody =
    req.headers['transfer-encoding'] !== undefined || Number(req.headers['content-length'] ?? 0) > 0
  if (!hasBody || req.is(['multipart/form-data', 'text/csv'])) return next()
  if (!req.is('application/json'))
    throw new AppError('wrong-media-type', 'Send JSON, with Content-Type: application/json.')
  parse(req, res, next)
}

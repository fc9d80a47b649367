import { randomBytes } from 'node:crypto'
import type { RequestHandler } from 'express'
import helmet from 'helmet'

declare module 'express-serve-static-core' {
  interface Locals {
    nonce: string
  }
}

/**
 * Security headers on every answer. Styles carry a nonce, because the component library makes `<style>` elements at run
 * time; scripts come from our own files only.
 */
export function securityHeaders({ https, dev }: { https: boolean; dev: boolean }): RequestHandler[] {
  const nonce: RequestHandler = (_req, res, next) => {
    res.locals.nonce = randomBytes(16).toString('base64')
    next()
  }
  const headers = helmet({
    contentSecurityPolicy: dev
      ? false
      : {
          useDefaults: false,
          directives: {
            defaultSrc: ["'none'"],
            scriptSrc: ["'self'", "'wasm-unsafe-eval'"],
            styleSrc: [
              "'self'",
              (_req, res) => `'nonce-${(res as { locals?: { nonce?: string } }).locals?.nonce}'`,
            ],
            imgSrc: ["'self'", 'data:', 'blob:'],
            // FullCalendar brings its arrows as a font in a data: address.
            fontSrc: ["'self'", 'data:'],
            connectSrc: ["'self'"],
            manifestSrc: ["'self'"],
            workerSrc: ["'self'"],
            formAction: ["'self'"],
            baseUri: ["'none'"],
            objectSrc: ["'none'"],
            frameAncestors: ["'none'"],
            ...(https && { upgradeInsecureRequests: [] }),
          },
        },
    strictTransportSecurity: https ? { maxAge: 31_536_000, includeSubDomains: true } : false,
    referrerPolicy: { policy: 'no-referrer' },
    crossOriginEmbedderPolicy: false,
    originAgentCluster: true,
  })
  const permissions: RequestHandler = (_req, res, next) => {
    res.setHeader('Permissions-Policy', 'camera=(self), geolocation=(), microphone=(), payment=(), usb=()')
    next()
  }
  return [nonce, headers, permissions]
}

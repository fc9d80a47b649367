import type { Request } from 'express'
import type { Endpoint } from '#shared/http/endpoint'
import type { Deps } from '../deps.ts'
import { AppError } from '../errors.ts'
import { recordAudit } from '../services/audit.ts'
import type { SignedIn } from './sessions.ts'

/**
 * Keeps the audit trail from one place: every refusal for want of a role, and every change that takes a steward's or an
 * admin's hand (approvals, overrides, hygiene, money, roles, settings) or that an endpoint marks as one to keep.
 */
export function auditor(deps: Deps, spec: Endpoint) {
  const action = `${spec.method} ${spec.path}`
  const kept =
    spec.method !== 'GET' && (spec.audited === true || spec.access === 'steward' || spec.access === 'admin')
  const note = (req: Request, user: SignedIn | undefined, outcome: string) => {
    const subject = subjectOf(req)
    recordAudit(deps, { actorId: user?.id, action, outcome, ...(subject && { subject }) })
  }
  return {
    done(req: Request, user: SignedIn | undefined) {
      if (kept) note(req, user, 'done')
    },
    refusals(req: Request, user: SignedIn | undefined, admit: () => void) {
      try {
        admit()
      } catch (error) {
        if (user && error instanceof AppError) note(req, user, error.code)
        throw error
      }
    },
  }
}

/** The thing acted on, by id; the secret of a link is none. */
function subjectOf(req: Request): string | undefined {
  const entry = Object.entries(req.params).find(([name]) => name !== 'token')
  return typeof entry?.[1] === 'string' ? entry[1].slice(0, 64) : undefined
}

/** What a person may do; each role includes the ones before it. */
export const ROLES = ['member', 'steward', 'admin'] as const
export type Role = (typeof ROLES)[number]

/** `suspended`: may sign in, see and return, not book. `left`: erased; the row stays so that history keeps its count. */
export const MEMBER_STATUSES = ['active', 'suspended', 'left'] as const
export type MemberStatus = (typeof MEMBER_STATUSES)[number]

/** True when `role` may do what `needed` may do. */
export const roleCovers = (role: Role, needed: Role) => ROLES.indexOf(role) >= ROLES.indexOf(needed)

export const JOIN_REQUEST_STATUSES = ['waiting', 'welcomed', 'declined'] as const
export type JoinRequestStatus = (typeof JOIN_REQUEST_STATUSES)[number]

/** Links that do one thing once. */
export const TOKEN_PURPOSES = ['invitation', 'password-reset', 'email-change', 'first-admin'] as const
export type TokenPurpose = (typeof TOKEN_PURPOSES)[number]

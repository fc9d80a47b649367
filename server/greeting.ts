import { DEMO_PASSWORD, DEMO_SIGN_INS } from './db/seed/people.ts'
import type { Env } from './env.ts'

/** What `npm start` says once it listens: where, and in the demo, who to be. */
export function greeting(env: Env): string {
  const lines = ['', `Barmhouse is open at ${env.appUrl}`]
  if (env.demo) {
    lines.push('', `Demo space. Sign in as any of these, password ${DEMO_PASSWORD}`)
    for (const { email, role } of DEMO_SIGN_INS) lines.push(`  ${email.padEnd(32)} ${role}`)
  }
  return lines.join('\n') + '\n\n'
}

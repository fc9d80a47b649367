import { createServer } from 'node:http'
import type { RequestHandler } from 'express'
import { pino } from 'pino'
import { createApp } from './app.ts'
import { systemClock } from './clock.ts'
import { openDb } from './db/open.ts'
import { seedDemo } from './db/seed/index.ts'
import type { Deps } from './deps.ts'
import { EnvError, readEnv, type Env } from './env.ts'
import { greeting } from './greeting.ts'
import { startJobs, type Jobs } from './jobs/scheduler.ts'
import { startCatcher } from './mail/catcher.ts'
import { smtpMailer } from './mail/smtp.ts'
import { zoneReader } from './services/space.ts'

/** env → database → deps → app → jobs → listen → close. The only file that does anything by being imported. */
async function main(env: Env) {
  const log = pino({ level: env.logLevel })
  const running: { jobs?: Jobs; closing?: true } = {}
  const db = openDb(env.databaseFile)
  const deps: Deps = {
    db,
    clock: systemClock(zoneReader(db, env.timeZone)),
    log,
    appUrl: env.appUrl,
    uploadsDir: env.uploadsDir,
    mailFrom: env.mailFrom,
    demo: env.demo,
    mailCaught: env.smtpUrl === undefined,
    mailAlive: () => !running.closing && (running.jobs?.alive() ?? false),
  }
  if (env.demo) await seedDemo(deps)
  const server = createServer({ headersTimeout: 10_000, requestTimeout: 120_000, keepAliveTimeout: 75_000 })
  const app = createApp(deps, {
    sessionSecret: env.sessionSecret,
    trustProxy: env.trustProxy,
    dev: env.dev,
    ...(env.dev && { client: await viteClient() }),
  })
  server.on('request', app)
  await new Promise<void>((resolve, reject) => server.once('error', reject).listen(env.port, resolve))
  const catcher = env.smtpUrl === undefined ? await startCatcher(deps) : undefined
  running.jobs = startJobs(deps, smtpMailer({ url: env.smtpUrl ?? catcher?.url ?? '', from: env.mailFrom }))
  process.stdout.write(greeting(env))

  const close = (signal: string) => {
    if (running.closing) process.exit(1)
    running.closing = true
    log.info({ signal }, 'closing')
    const stopped = running.jobs?.stop()
    server.close(() => void finish(stopped))
    server.closeIdleConnections()
    setTimeout(() => server.closeAllConnections(), 10_000).unref()
  }
  const finish = async (stopped?: Promise<void>) => {
    // A letter on its way may take a minute; its lease lets the next start send it if this one cannot say it went.
    await Promise.race([stopped, new Promise((resolve) => setTimeout(resolve, 8_000).unref())])
    await Promise.race([catcher?.close(), new Promise((resolve) => setTimeout(resolve, 1_000).unref())])
    db.$client.pragma('optimize')
    db.$client.pragma('wal_checkpoint(TRUNCATE)')
    db.$client.close()
    process.exit(0)
  }
  process.on('SIGTERM', close)
  process.on('SIGINT', close)
}

/** Vite in this process: one port, reload on edit. */
async function viteClient(): Promise<RequestHandler> {
  const { createServer: createVite } = await import('vite')
  const vite = await createVite({ server: { middlewareMode: true }, appType: 'spa' })
  return vite.middlewares
}

try {
  await main(readEnv(process.env))
} catch (error) {
  if (error instanceof EnvError) process.stderr.write(`${error.message}\n`)
  else if ((error as NodeJS.ErrnoException).code === 'EADDRINUSE')
    process.stderr.write('PORT: something else is already listening there. Choose another, like PORT=3001.\n')
  else process.stderr.write(`${error instanceof Error ? error.stack : String(error)}\n`)
  process.exit(1)
}

import { BackupError } from '../services/backup.ts'
import { EnvError, readEnv, type Env } from '../env.ts'

/** Runs a command with the checked environment; a mistake is one clear line and exit 1. */
export async function command(run: (env: Env, args: string[]) => void | Promise<void>) {
  try {
    await run(readEnv(process.env), process.argv.slice(2))
  } catch (error) {
    const known = [EnvError, CommandError, BackupError].some((kind) => error instanceof kind)
    const { message, stack } = error as Error
    process.stderr.write(`${known ? message : stack}\n`)
    process.exitCode = 1
  }
}

/** A mistake of the person at the keys. */
export class CommandError extends Error {}

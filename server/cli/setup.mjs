// What a bare clone needs before anything of ours can run: packages from the lock, and the built client.
// Plain JavaScript on purpose: it runs before TypeScript is there.
import { spawnSync } from 'node:child_process'
import { createHash } from 'node:crypto'
import { existsSync, mkdirSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs'
import { dirname, join, resolve } from 'node:path'
import { fileURLToPath } from 'node:url'

export const ROOT = resolve(dirname(fileURLToPath(import.meta.url)), '../..')

const say = (line) => process.stdout.write(`${line}\n`)

/** Runs a command in the project's folder with its output shown; ends this process when it fails. */
function run(command, args, env = {}) {
  const { status, error } = spawnSync(command, args, {
    cwd: ROOT,
    stdio: 'inherit',
    env: { ...process.env, ...env },
  })
  if (error) {
    process.stderr.write(`${command} could not be started: ${error.message}\n`)
    process.exit(1)
  }
  if (status !== 0) process.exit(status ?? 1)
}

/** Node's own headers, where they lie beside it: named to the native build, so that it downloads none. */
function headersBesideNode() {
  const prefix = dirname(dirname(process.execPath))
  return existsSync(join(prefix, 'include/node/node_version.h')) ? { npm_config_nodedir: prefix } : {}
}

const digestOf = (...parts) =>
  parts.reduce((hash, part) => hash.update(part), createHash('sha256')).digest('hex')

function stampMatches(file, value) {
  return existsSync(file) && readFileSync(file, 'utf8') === value
}

/** Installs from the lock unless exactly that is installed already. `dev` takes the test tools as well. */
export function ensureInstalled({ dev = false } = {}) {
  const lock = readFileSync(join(ROOT, 'package-lock.json'))
  const stamp = join(ROOT, 'node_modules/.installed')
  const wanted = digestOf(lock, process.version)
  const whole = stampMatches(stamp, `${wanted} all`)
  if (whole || (!dev && stampMatches(stamp, `${wanted} run`))) return
  const omitDev = !dev && process.env.NODE_ENV === 'production'
  say('Installing packages from the lock (the database driver is compiled, which takes a minute or two) …')
  const args = ['ci', '--no-audit', '--no-fund', omitDev ? '--omit=dev' : '--include=dev']
  run(process.platform === 'win32' ? 'npm.cmd' : 'npm', args, headersBesideNode())
  writeFileSync(stamp, `${wanted} ${omitDev ? 'run' : 'all'}`)
}

const BUILT_FROM = ['src', 'shared', 'index.html', 'vite.config.ts', 'package-lock.json']

function* filesUnder(path) {
  if (!statSync(path).isDirectory()) yield path
  else for (const name of readdirSync(path).sort()) yield* filesUnder(join(path, name))
}

/** Builds the client unless what is built came from these very sources. */
export function ensureBuilt() {
  const files = BUILT_FROM.flatMap((path) => [...filesUnder(join(ROOT, path))])
  const wanted = digestOf(...files.flatMap((file) => [file.slice(ROOT.length), readFileSync(file)]))
  const stamp = join(ROOT, 'dist/client-built-from')
  if (stampMatches(stamp, wanted) && existsSync(join(ROOT, 'dist/client/index.html'))) return
  say('Building the client …')
  run(process.execPath, [join(ROOT, 'node_modules/vite/bin/vite.js'), 'build', '--logLevel', 'warn'])
  mkdirSync(dirname(stamp), { recursive: true })
  writeFileSync(stamp, wanted)
}

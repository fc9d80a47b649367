// npm start: from a bare clone to a running application.
import { spawn } from 'node:child_process'
import { ensureBuilt, ensureInstalled, ROOT } from './setup.mjs'

ensureInstalled()
ensureBuilt()

const server = spawn(process.execPath, ['--import', 'tsx', 'server/main.ts'], { cwd: ROOT, stdio: 'inherit' })
for (const signal of ['SIGINT', 'SIGTERM']) process.on(signal, () => server.kill(signal))
server.on('exit', (code, signal) => process.exit(code ?? (signal ? 1 : 0)))

import { spawnSync } from 'node:child_process'
import { existsSync } from 'node:fs'

const NAMES = ['chromium', 'chromium-browser', 'google-chrome', 'google-chrome-stable', 'microsoft-edge']
const FOLDERS = ['/usr/bin', '/usr/local/bin', '/snap/bin', '/opt/google/chrome']
const MAC = '/Applications/Google Chrome.app/Contents/MacOS/Google Chrome'

function look() {
  const places = [process.env.CHROMIUM_PATH, ...FOLDERS.flatMap((f) => NAMES.map((n) => `${f}/${n}`)), MAC]
  return places.find((path) => path && existsSync(path))
}

/**
 * Where a Chromium is, or undefined. With `install`, a Debian machine that we are root on gets one from its own packages.
 * @param {{ install?: boolean }} [options]
 * @returns {string | undefined}
 */
export function findChromium({ install = false } = {}) {
  const found = look()
  if (found || !install) return found
  const mayInstall = process.getuid?.() === 0 && existsSync('/usr/bin/apt-get')
  if (!mayInstall) return undefined
  process.stdout.write('Installing Chromium for the journeys …\n')
  const apt = (/** @type {string[]} */ ...args) =>
    spawnSync('apt-get', args, {
      stdio: 'inherit',
      env: { ...process.env, DEBIAN_FRONTEND: 'noninteractive' },
    })
  apt('update')
  apt('install', '-y', '--no-install-recommends', 'chromium')
  return look()
}

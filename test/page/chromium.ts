/** A real Chromium for the page's tests: one that is there, or one that the package manager brings when it may. */
import { spawnSync } from 'node:child_process'
import { existsSync, readdirSync } from 'node:fs'
import { homedir } from 'node:os'
import { join } from 'node:path'
import { chromium, type Browser } from 'playwright-core'

const usual = ['/usr/bin/chromium', '/usr/bin/chromium-browser', '/usr/bin/google-chrome', '/Applications/Chromium.app/Contents/MacOS/Chromium']

function cached(): string[] {
  const folder = join(homedir(), '.cache', 'ms-playwright')
  if (!existsSync(folder)) return []
  return readdirSync(folder).filter((name) => name.startsWith('chromium-')).map((name) => join(folder, name, 'chrome-linux', 'chrome'))
}

function found(): string | undefined {
  return [process.env['CHROME_PATH'] ?? '', ...usual, ...cached()].find((path) => path !== '' && existsSync(path))
}

/** Flags: no sandbox for root in containers, nothing fetched in the background, no graphics card needed. */
const flags = ['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync']

export async function startBrowser(more: readonly string[] = []): Promise<Browser> {
  let path = found()
  if (path === undefined && process.getuid?.() === 0) {
    spawnSync('apt-get', ['update'], { stdio: 'ignore' })
    spawnSync('apt-get', ['install', '-y', 'chromium'], { stdio: 'ignore', env: { ...process.env, DEBIAN_FRONTEND: 'noninteractive' } })
    path = found()
  }
  if (path === undefined) throw new Error('No Chromium was found. Install one, or set CHROME_PATH to it.')
  return chromium.launch({ executablePath: path, args: [...flags, ...more] })
}

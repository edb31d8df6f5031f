// Plain Node without packages: it has to work before anything is installed.
import { spawn, spawnSync } from 'node:child_process'
import { existsSync, readFileSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'

const COMMANDS = ['start', 'dev', 'test', 'bench', 'validate']
const root = join(dirname(fileURLToPath(import.meta.url)), '..')

function stop(sentence) {
  process.stderr.write(`${sentence}\n`)
  process.exit(1)
}

/** The same releases as "engines" in package.json. */
function requireNode() {
  const [major = 0, minor = 0] = process.versions.node.split('.').map(Number)
  if ((major === 20 && minor >= 19) || (major === 22 && minor >= 12) || major > 22) return
  stop(`Scruple needs Node 20.19 or later, or 22.12 or later; this is ${process.versions.node}.`)
}

function packagesOf(file) {
  if (!existsSync(file)) return undefined
  const { packages } = JSON.parse(readFileSync(file, 'utf8'))
  return new Map(Object.entries(packages).filter(([place]) => place !== ''))
}

/** npm notes what it installed; optional packages for other machines are not among it. */
function isInstalled() {
  const installed = packagesOf(join(root, 'node_modules', '.package-lock.json'))
  const wanted = packagesOf(join(root, 'package-lock.json'))
  if (!installed || !wanted) return false
  for (const place of installed.keys()) if (!wanted.has(place)) return false
  for (const [place, { version, optional }] of wanted) {
    const found = installed.get(place)
    if (found ? found.version !== version : !optional) return false
  }
  return true
}

/** With the tools for building and testing, whatever NODE_ENV says: a start builds the client. */
function installPackages() {
  process.stdout.write('Installing the npm packages (about a minute, once) …\n')
  const npm = ['ci', '--include=dev', '--prefer-offline', '--no-audit', '--no-fund', '--loglevel=error']
  const { status } = spawnSync('npm', npm, { cwd: root, stdio: ['ignore', 'inherit', 'inherit'] })
  if (status !== 0) stop('The npm packages could not be installed; see the lines above.')
}

const [command = '', ...rest] = process.argv.slice(2)
requireNode()
if (!COMMANDS.includes(command)) stop(`There is no command "${command}"; there are ${COMMANDS.join(', ')}.`)
if (!isInstalled()) installPackages()

const child = spawn(process.execPath, ['--import', 'tsx', join('scripts', `${command}.ts`), ...rest], {
  cwd: root,
  stdio: 'inherit',
  env: { ...process.env, TZ: 'UTC' },
})
// This process stays until the child has tidied up. Ctrl-C in a terminal reaches the child twice, which it bears.
for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, () => child.kill(signal))
child.on('exit', (code, signal) => process.exit(code ?? (signal === 'SIGINT' ? 130 : 1)))

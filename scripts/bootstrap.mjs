// Plain Node without packages: it has to work before anything is installed.
import { spawn, spawnSync } from 'node:child_process'
import { existsSync, readFileSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'

const root = join(dirname(fileURLToPath(import.meta.url)), '..')
const [command, ...rest] = process.argv.slice(2)
const [major = 0, minor = 0] = process.versions.node.split('.').map(Number)

function stop(sentence) {
  process.stderr.write(`${sentence}\n`)
  process.exit(1)
}

if (major < 20 || (major === 20 && minor < 19)) stop(`Scruple needs Node 20.19 or newer; this is ${process.versions.node}.`)
if (!existsSync(join(root, 'scripts', `${command}.ts`))) stop(`There is no command "${command}".`)

/** npm writes what it installed into node_modules; when that is what the lock file asks for, nothing has to be done. */
function packagesOf(file) {
  if (!existsSync(file)) return undefined
  const { packages } = JSON.parse(readFileSync(file, 'utf8'))
  return Object.fromEntries(Object.entries(packages).map(([name, { version }]) => [name, version]))
}

function isInstalled() {
  const installed = packagesOf(join(root, 'node_modules', '.package-lock.json'))
  const wanted = packagesOf(join(root, 'package-lock.json'))
  if (!installed || !wanted) return false
  return Object.entries(installed).every(([name, version]) => wanted[name] === version) && 'node_modules/tsx' in installed
}

if (!isInstalled()) {
  process.stdout.write('Installing the npm packages (about a minute, once) …\n')
  const { status } = spawnSync('npm', ['ci', '--prefer-offline', '--no-audit', '--no-fund', '--loglevel=error'], {
    cwd: root,
    stdio: 'inherit',
  })
  if (status !== 0) stop('The npm packages could not be installed; see the lines above.')
}

const child = spawn(process.execPath, ['--import', 'tsx', join('scripts', `${command}.ts`), ...rest], {
  cwd: root,
  stdio: 'inherit',
  env: { ...process.env, TZ: 'UTC' },
})
// Ctrl-C reaches the child by itself; this process only has to stay until the child has tidied up.
for (const signal of ['SIGINT', 'SIGTERM']) {
  process.on(signal, () => {
    if (signal === 'SIGTERM') child.kill(signal)
  })
}
child.on('exit', (code, signal) => process.exit(code ?? (signal === 'SIGINT' ? 130 : 1)))

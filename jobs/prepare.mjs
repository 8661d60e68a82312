// What has to be in place before Kilnward starts or is tested. Plain Node: it runs before anything is installed.
import { spawnSync } from 'node:child_process'
import { createHash } from 'node:crypto'
import { existsSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { dirname, join } from 'node:path'

const root = dirname(import.meta.dirname)
const SQLITE_BINARY = 'node_modules/sqlite3/build/Release/node_sqlite3.node'
const BUILD_STAMP = '.next/kilnward-sources'

/** Everything that goes into the build; a test or a job that changes needs none. */
const BUILD_SOURCES = [
  'app',
  'lib',
  'models',
  'db',
  'public',
  'fonts',
  'instrumentation.ts',
  'instrumentation-client.ts',
  'proxy.ts',
  'next.config.mjs',
  'postcss.config.mjs',
  'tailwind.config.ts',
  'tsconfig.json',
  'package-lock.json',
]

/** Runs a command in the project folder with its output shown; throws when it fails. */
function run(command, args, env = {}) {
  const { status, error } = spawnSync(command, args, { cwd: root, stdio: 'inherit', env: { ...process.env, ...env } })
  if (error) throw error
  if (status !== 0) throw new Error(`${[command, ...args].join(' ')} failed.`)
}

const readJson = (file) => JSON.parse(readFileSync(join(root, file), 'utf8'))

/** Whether node_modules holds what package-lock.json asks for; npm keeps its own list of what it put there. */
function isInstalled() {
  if (!existsSync(join(root, SQLITE_BINARY)) || !existsSync(join(root, 'node_modules/.package-lock.json'))) return false
  const present = readJson('node_modules/.package-lock.json').packages
  return Object.entries(readJson('package-lock.json').packages).every(
    ([path, wanted]) => path === '' || wanted.optional || present[path]?.version === wanted.version,
  )
}

/**
 * Installs the packages of package-lock.json if they are missing or others. sqlite3 is compiled here:
 * needs g++, make and python3.
 */
export function ensureInstalled() {
  if (isInstalled()) return
  const prefix = dirname(dirname(process.execPath))
  const hasHeaders = existsSync(join(prefix, 'include/node/node_api.h'))
  run('npm', ['ci', '--no-audit', '--no-fund'], {
    npm_config_build_from_source: 'true',
    // Without them node-gyp looks for the headers on the net.
    ...(hasHeaders ? { npm_config_nodedir: prefix } : {}),
  })
  if (!existsSync(join(root, SQLITE_BINARY))) {
    throw new Error('sqlite3 was not compiled. Install g++, make and python3, delete node_modules, and try again.')
  }
}

function filesUnder(path) {
  const full = join(root, path)
  if (!existsSync(full)) return []
  if (/\.[a-z]+$/.test(path)) return [path]
  return readdirSync(full, { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile())
    .map((entry) => join(entry.parentPath, entry.name).slice(root.length + 1))
}

function hashSources() {
  const hash = createHash('sha256')
  for (const file of BUILD_SOURCES.flatMap(filesUnder).toSorted((left, right) => (left < right ? -1 : 1))) {
    hash
      .update(file)
      .update('\0')
      .update(readFileSync(join(root, file)))
      .update('\0')
  }
  return hash.digest('hex')
}

/** Builds for production unless the last build was made from the same files. */
export function ensureBuilt() {
  const sources = hashSources()
  const stamp = join(root, BUILD_STAMP)
  if (existsSync(stamp) && existsSync(join(root, '.next/BUILD_ID')) && readFileSync(stamp, 'utf8') === sources) return
  // TypeScript 7 trusts it more than the route types that the build has just written anew, and then knows no new page.
  rmSync(join(root, '.next/cache/.tsbuildinfo'), { force: true })
  run(process.execPath, ['node_modules/next/dist/bin/next', 'build'], { NODE_ENV: 'production', NEXT_TELEMETRY_DISABLED: '1' })
  writeFileSync(stamp, sources)
}

import { spawnSync } from 'node:child_process'
import { cpSync, existsSync, mkdirSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'

const root = join(import.meta.dirname, '../..')
/** Inside the project, so that both find its node_modules; gone again when the bench ends. */
const WORK = join(import.meta.dirname, 'work')
export const NEXT = join(root, 'node_modules/next/dist/bin/next')

const PRODUCT = ['app', 'lib', 'models', 'db', 'jobs', 'public', 'fonts', 'instrumentation.ts', 'proxy.ts', 'package.json']
const CONFIGS = ['next.config.mjs', 'postcss.config.mjs', 'tailwind.config.ts', 'tsconfig.json']

export type Builds = { product: string; bare: string; remove: () => void }

/**
 * Builds what is measured: a copy of the product with one more route, which does nothing, and a bare app of the same
 * framework and React. The product itself never has such a route.
 *
 * @throws {Error} with the output of a build that failed.
 */
export function makeBuilds(): Builds {
  const remove = () => rmSync(WORK, { recursive: true, force: true })
  remove()
  const product = join(WORK, 'product')
  const bare = join(WORK, 'bare')
  mkdirSync(join(product, 'app/api/empty'), { recursive: true })
  for (const name of [...PRODUCT, ...CONFIGS].filter((each) => existsSync(join(root, each)))) {
    cpSync(join(root, name), join(product, name), { recursive: true, filter: (source) => !source.includes('/.next') })
  }
  cpSync(join(import.meta.dirname, 'empty-route.ts'), join(product, 'app/api/empty/route.ts'))
  cpSync(join(import.meta.dirname, 'bare'), bare, { recursive: true })
  writeFileSync(join(bare, 'next.config.mjs'), `export default { turbopack: { root: ${JSON.stringify(root)} }, poweredByHeader: false }\n`)
  build(bare)
  build(product)
  return { product, bare, remove }
}

function build(folder: string): void {
  const { status, stdout, stderr } = spawnSync(process.execPath, [NEXT, 'build'], {
    cwd: folder,
    env: { ...process.env, NODE_ENV: 'production', NEXT_TELEMETRY_DISABLED: '1' },
    encoding: 'utf8',
  })
  if (status !== 0) throw new Error(`The build of ${folder} failed:\n${stdout}\n${stderr}`)
}

import { spawnSync } from 'node:child_process'
import { cpSync, existsSync, mkdirSync, renameSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'

const root = join(import.meta.dirname, '../..')
/** On the disk of node_modules, so that each build can have them as links; gone again when the bench ends. */
const WORK = join(import.meta.dirname, 'work')

const PRODUCT = ['app', 'lib', 'models', 'db', 'jobs', 'public', 'fonts', 'instrumentation.ts', 'proxy.ts', 'package.json']
const CONFIGS = ['next.config.mjs', 'postcss.config.mjs', 'tailwind.config.ts', 'tsconfig.json']

/** Else the framework takes the project around it for its own. */
const OWN_ROOT = 'turbopack: { root: import.meta.dirname }'

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
  try {
    const product = join(WORK, 'product')
    mkdirSync(join(product, 'app/api/empty'), { recursive: true })
    for (const name of [...PRODUCT, ...CONFIGS]) {
      if (existsSync(join(root, name))) cpSync(join(root, name), join(product, name), { recursive: true })
    }
    cpSync(join(import.meta.dirname, 'empty-route.ts'), join(product, 'app/api/empty/route.ts'))
    renameSync(join(product, 'next.config.mjs'), join(product, 'product.config.mjs'))
    configure(product, `import product from './product.config.mjs'\nexport default { ...product, ${OWN_ROOT} }\n`)

    const bare = join(WORK, 'bare')
    cpSync(join(import.meta.dirname, 'bare'), bare, { recursive: true })
    cpSync(join(root, 'package.json'), join(bare, 'package.json'))
    configure(bare, `export default { poweredByHeader: false, ${OWN_ROOT} }\n`)
    build(bare)
    build(product)
    return { product, bare, remove }
  } catch (error) {
    remove()
    throw error
  }
}

function configure(folder: string, text: string): void {
  writeFileSync(join(folder, 'next.config.mjs'), text)
}

function build(folder: string): void {
  run(folder, 'cp', ['-al', join(root, 'node_modules'), folder])
  run(folder, process.execPath, ['node_modules/next/dist/bin/next', 'build'])
}

function run(cwd: string, command: string, args: string[]): void {
  const env = { ...process.env, NODE_ENV: 'production' as const, NEXT_TELEMETRY_DISABLED: '1' }
  const { status, stdout, stderr } = spawnSync(command, args, { cwd, env, encoding: 'utf8' })
  if (status !== 0) throw new Error(`${command} ${args.join(' ')} failed in ${cwd}:\n${stdout}\n${stderr}`)
}

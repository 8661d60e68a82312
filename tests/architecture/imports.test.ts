import { existsSync, readdirSync, readFileSync } from 'node:fs'
import { basename, dirname, join, relative } from 'node:path'
import { describe, expect, it } from 'vitest'

const root = join(import.meta.dirname, '../..')
const FOLDERS = ['app', 'jobs', 'lib', 'models', 'db']

/** Folders of lib/ that are not a domain: they touch the world, or are the leaves under all. */
const NOT_DOMAIN = /^lib\/(core|commands|queries|server|demo)\//
const isDomain = (path: string) => path.startsWith('lib/') && !NOT_DOMAIN.test(path)
const DOMAIN_PACKAGE = /^package:(?:zod|psychrolib|date-fns(?:\/constants)?|@date-fns\/tz)$/

/** Run once from the terminal and not by the worker: they make, restore or mend the records, and tell a person there. */
const START_SCRIPTS = ['jobs/seed-demo.ts', 'jobs/demo-sign-ins.ts', 'jobs/restore-records.ts', 'jobs/first-password.ts']

/** Inner layers know nothing of outer ones. The first prefix that fits decides; 'domain' is every folder of values and rules in lib/. */
const LAYERS: readonly (readonly [prefix: string, mayImport: readonly string[]])[] = [
  ['lib/core/', ['lib/core/']],
  ['lib/commands/', ['domain', 'lib/core/', 'lib/commands/', 'lib/queries/', 'lib/server/', 'models/']],
  // The documented sign-ins are plain values.
  ['lib/queries/', ['domain', 'lib/core/', 'lib/queries/', 'lib/server/', 'lib/demo/people/', 'models/']],
  ['lib/demo/', ['domain', 'lib/', 'models/']],
  ['lib/server/', ['domain', 'lib/', 'models/', 'db/']],
  ['lib/', ['domain']],
  ['models/', ['domain', 'models/', 'db/connection/']],
  ['db/', ['db/']],
  ...START_SCRIPTS.map((file) => [file, ['jobs/', 'domain', 'lib/', 'models/', 'db/']] as const),
  ['jobs/', ['jobs/', 'domain', 'lib/']],
  ['app/', ['app/', 'domain', 'lib/']],
]

const sourceFiles = FOLDERS.filter((folder) => existsSync(join(root, folder))).flatMap((folder) =>
  readdirSync(join(root, folder), { recursive: true, encoding: 'utf8' })
    .filter((name) => /(?<!\.d)\.tsx?$/.test(name))
    .map((name) => `${folder}/${name}`),
)
const textOf = (file: string) => readFileSync(join(root, file), 'utf8')
/** Code without comments, so that a rule is not broken by a sentence about it. */
const codeOf = (file: string) => textOf(file).replaceAll(/\/\*[\s\S]*?\*\/|(?<!:)\/\/.*$/gm, '')

function* importsOf(file: string): Generator<string> {
  for (const [, specifier = ''] of codeOf(file).matchAll(/(?:\bfrom|\bimport|\bimport\()\s*['"]([\w@./:[\]()-]+)['"]/g)) {
    if (specifier.startsWith('@/')) yield specifier.slice(2)
    else if (specifier.startsWith('.')) yield relative(root, join(root, dirname(file), specifier))
    else yield `package:${specifier}`
  }
}

const isAllowed = (target: string, allowed: readonly string[]) =>
  target.startsWith('package:') || allowed.some((prefix) => (prefix === 'domain' ? isDomain(target) : `${target}/`.startsWith(prefix)))

const arrows = (files: readonly string[], isWrong: (target: string, file: string) => boolean) =>
  files.flatMap((file) => [...importsOf(file)].filter((target) => isWrong(target, file)).map((target) => `${file} -> ${target}`))

describe('imports', () => {
  it('run one way: app and jobs, then lib/{server,commands,queries,demo}, then models, then the connection', () => {
    const wrong = arrows(sourceFiles, (target, file) => {
      const allowed = LAYERS.find(([prefix]) => file.startsWith(prefix))?.[1] ?? []
      return !isAllowed(target, allowed)
    })
    expect(wrong).toEqual([])
  })

  it('of a domain folder name no package that reads or writes anything', () => {
    const wrong = arrows(sourceFiles.filter(isDomain), (target) => target.startsWith('package:') && !DOMAIN_PACKAGE.test(target))
    expect(wrong).toEqual([])
  })

  it('of a shared component, or of anything that runs in the browser, lead to nothing of the server', () => {
    const browser = sourceFiles.filter((file) => file.startsWith('app/_components/') || /^\s*['"]use client['"]/.test(textOf(file)))
    const wrong = arrows(browser, (target, file) => {
      const isServer = (path: string) =>
        (/^lib\/(commands|queries|server|demo)\//.test(`${path}/`) || /^(models|db)\//.test(`${path}/`)) && !isTypeOnly(file, path)
      return isServer(target)
    })
    expect(wrong).toEqual([])
  })
})

function isTypeOnly(file: string, target: string): boolean {
  const statements = codeOf(file).match(/import[^;'"]*from\s*['"][^'"]+['"]/g) ?? []
  return statements.filter((statement) => statement.includes(`@/${target}`)).every((statement) => statement.startsWith('import type'))
}

const having = (files: readonly string[], pattern: RegExp) => files.filter((file) => pattern.test(codeOf(file)))

describe('purity', () => {
  const PRESENT = /\bnew Date\(\)|\bDate\.now\(|\bMath\.random\(|\bperformance\.now\(/

  it('the present and chance come in as arguments', () => {
    const timeless = sourceFiles.filter(
      (file) => isDomain(file) || /^lib\/(queries|commands|demo)\//.test(file) || (file.startsWith('jobs/') && file !== 'jobs/worker.ts'),
    )
    expect(having(timeless, PRESENT)).toEqual([])
  })

  it('the environment is read in one place, and the data folder in another', () => {
    const readers = having(sourceFiles, /\bprocess\.env\b/)
    expect(readers.filter((file) => file !== 'lib/core/env.ts' && file !== 'db/connection.ts')).toEqual([])
  })

  it('only the log writes to the console or its streams', () => {
    const writers = having(sourceFiles, /\bconsole\.\w+\(|\bprocess\.std(?:out|err)\.write\(/)
    expect(writers.filter((file) => file !== 'lib/core/log.ts' && !START_SCRIPTS.includes(file))).toEqual([])
  })
})

const isKebab = (name: string) => /^[a-z0-9]+(?:-[a-z0-9]+)*(?:\.[a-z]+)*$/.test(name)

describe('names', () => {
  it('of files and folders are kebab-case', () => {
    const odd = sourceFiles.filter((file) =>
      file.split('/').some((part) => !isKebab(part.replace(/^_/, '')) && !/^\(.+\)$|^\[.+\]$/.test(part)),
    )
    expect(odd).toEqual([])
  })

  it('of files say what is inside', () => {
    expect(sourceFiles.filter((file) => /^(?:utils?|helpers?|misc|common|shared|stuff)\./.test(basename(file)))).toEqual([])
  })

  it('of barrels do not exist, but for the models, which have to be joined to each other', () => {
    const barrels = sourceFiles.filter((file) => /^index\.tsx?$/.test(basename(file)) || /^export \* from/m.test(codeOf(file)))
    expect(barrels).toEqual(['models/index.ts'])
  })

  it('of models are written out, because a production build shortens those of classes', () => {
    const models = sourceFiles.filter((file) => file.startsWith('models/') && /\bextends Model\b/.test(codeOf(file)))
    expect(models.length).toBeGreaterThan(0)
    const unnamed = models.filter((file) => {
      const [, name = ''] = /export class (\w+) extends Model\b/.exec(codeOf(file)) ?? []
      return !codeOf(file).includes(`modelName: '${name}'`)
    })
    expect(unnamed).toEqual([])
  })
})

describe('words', () => {
  it('every function that a domain folder exports says what it does', () => {
    const silent = sourceFiles
      .filter(isDomain)
      .flatMap((file) =>
        [
          ...textOf(file).matchAll(
            /(\*\/\n)?export (?:async )?(?:function\*? (\w+)|const (\w+) = (?:async )?(?:\([^)]*\)|\w+)(?:: [^=]+)? =>)/g,
          ),
        ]
          .filter(([, doc]) => doc === undefined)
          .map(([, , name, constant]) => `${file}: ${name ?? constant}`),
      )
    expect(silent).toEqual([])
  })
})

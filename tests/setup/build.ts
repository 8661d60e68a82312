import { existsSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { z } from 'zod'

const root = join(import.meta.dirname, '../..')
const readBuild = (file: string): unknown => JSON.parse(readFileSync(join(root, '.next', file), 'utf8'))
const METHODS = ['GET', 'POST', 'PUT', 'PATCH', 'DELETE'] as const

/** Exported HTTP methods of a route module. HEAD and OPTIONS are the framework's own. */
export function methodsOf(source: string): string[] {
  return METHODS.filter((method) =>
    new RegExp(String.raw`export\s+(?:(?:async\s+)?function|const)\s+${method}\b|export\s*\{[^}]*\b${method}\b[^}]*\}`).test(source),
  )
}

/** Every page and route of the build as 'METHOD /route'; a page counts as method PAGE. */
export function builtDoors(): string[] {
  const paths = z.record(z.string(), z.string()).parse(readBuild('app-path-routes-manifest.json'))
  return Object.entries(paths).flatMap(([key, route]) => {
    if (key === '/_not-found/page' || key === '/_global-error/page') return []
    if (key.endsWith('/page')) return [`PAGE ${route}`]
    const file = ['ts', 'tsx'].map((ending) => join(root, `app${key}.${ending}`)).find((path) => existsSync(path))
    // Icons and the manifest have a module of the framework's, which only reads.
    return (file ? methodsOf(readFileSync(file, 'utf8')) : ['GET']).map((method) => `${method} ${route}`)
  })
}

/** Every server action of the build: its file, its exported name, and the id that a browser calls it by. */
export function builtActions(): { file: string; name: string; id: string }[] {
  const entry = z.looseObject({ filename: z.string(), exportedName: z.string() })
  const manifest = z.looseObject({ node: z.record(z.string(), entry), edge: z.record(z.string(), entry) })
  const { node, edge } = manifest.parse(readBuild('server/server-reference-manifest.json'))
  const seen = [...Object.entries(node), ...Object.entries(edge)].map(([id, { filename, exportedName }]) => ({
    file: filename,
    name: exportedName,
    id,
  }))
  return seen.filter((one, index) => seen.findIndex((other) => other.file === one.file && other.name === one.name) === index)
}

/** Source text of a file of the project. */
export const sourceOf = (file: string): string => readFileSync(join(root, file), 'utf8')

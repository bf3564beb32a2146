import { existsSync, readdirSync, readFileSync } from 'node:fs'
import { dirname, join, relative, resolve } from 'node:path'
import { describe, expect, it } from 'vitest'
import { PERMISSIONS } from '#shared/permission/permission'

const root = resolve(import.meta.dirname, '../..')
const aliases: Record<string, string> = { '#shared': 'shared', '#server': 'server', '~~': '.', '@@': '.', '~': 'app', '@': 'app' }

/** Which room may not import from where (architecture.md). Nuxt itself lets a page import `#server/services` and builds it silently. */
const RULES: { room: string, notFrom: RegExp, notPackages: RegExp }[] = [
  { room: 'shared', notFrom: /^(app|server|drizzle|tests|scripts)(\/|$)/, notPackages: /^(vue|pinia|nuxt|h3|nitropack|drizzle-orm|pg|sharp|node:.*)$/ },
  { room: 'app', notFrom: /^(server|drizzle|tests|scripts)(\/|$)/, notPackages: /^(h3|nitropack|drizzle-orm|pg|sharp|node:.*)$/ },
  { room: 'server/api', notFrom: /^(app|tests|scripts|server\/database|server\/documents|server\/storage)(\/|$)/, notPackages: /^(drizzle-orm|pg|vue|pinia)$/ },
  { room: 'server/routes', notFrom: /^(app|tests|scripts|server\/database|server\/documents|server\/storage)(\/|$)/, notPackages: /^(drizzle-orm|pg|vue|pinia)$/ },
  { room: 'server/services', notFrom: /^(app|tests|scripts|server\/http|server\/api|server\/routes)(\/|$)/, notPackages: /^(h3|nitropack|vue|pinia)$/ },
  { room: 'server/database', notFrom: /^(app|tests|scripts|server\/http|server\/api)(\/|$)/, notPackages: /^(h3|nitropack|vue|pinia)$/ },
  { room: 'server/documents', notFrom: /^(app|tests|scripts|server\/http|server\/api|server\/database|server\/services)(\/|$)/, notPackages: /^(h3|nitropack|vue|pinia|drizzle-orm|pg)$/ },
]

const filesUnder = (room: string) => !existsSync(join(root, room)) ? [] : readdirSync(join(root, room), { recursive: true, withFileTypes: true })
  .filter(entry => entry.isFile() && /\.(ts|vue)$/.test(entry.name)).map(entry => join(entry.parentPath, entry.name))

function placeOf(specifier: string, file: string): string | null {
  if (specifier.startsWith('.')) return relative(root, resolve(dirname(file), specifier))
  const [head = '', ...rest] = specifier.split('/')
  return head in aliases ? join(aliases[head]!, ...rest) : null
}

const importsOf = (file: string) => [...readFileSync(file, 'utf8').matchAll(/(?:from|import\(|^import)\s*['"]([^'"]+)['"]/gm)].map(match => match[1]!)

describe('the rooms of the house', () => {
  it.each(RULES)('$room imports only what it may', ({ room, notFrom, notPackages }) => {
    const found = filesUnder(room).flatMap(file => importsOf(file)
      .filter((specifier) => {
        const place = placeOf(specifier, file)
        return place === null ? notPackages.test(specifier.split('/')[0]!.startsWith('@') ? specifier : specifier.split('/')[0]!) || notPackages.test(specifier) : notFrom.test(place)
      })
      .map(specifier => `${relative(root, file)} imports ${specifier}`))
    expect(found).toEqual([])
  })

  it('keeps SQL in server/database: services and routes call it by name', () => {
    const found = ['server/api', 'server/routes', 'server/services', 'server/http', 'server/mail', 'server/storage'].flatMap(filesUnder)
      .filter(file => /[`'"]\s*(select|insert into|update|delete from)\s+\w/.test(readFileSync(file, 'utf8'))).map(file => relative(root, file))
    // A health probe and the advisory lock of a sealing are about the connection, not about rows.
    expect(found.filter(file => !['server/services/health.ts', 'server/services/record/sealRecord.ts'].includes(file))).toEqual([])
  })

  it('has no circle among the words of the services', () => {
    const graph = new Map<string, Set<string>>()
    const fileOf = (place: string) => `${place}.ts`
    for (const file of filesUnder('server/services')) graph.set(relative(root, file), new Set(importsOf(file).map(specifier => placeOf(specifier, file)).filter((place): place is string => place !== null && place.startsWith('server/services')).map(fileOf)))
    const circles: string[] = []
    const visit = (file: string, path: string[]): void => {
      if (path.includes(file)) { circles.push([...path.slice(path.indexOf(file)), file].join(' > ')); return }
      if (done.has(file)) return
      for (const next of graph.get(file) ?? []) visit(next, [...path, file])
      done.add(file)
    }
    const done = new Set<string>()
    for (const file of graph.keys()) visit(file, [])
    expect(circles).toEqual([])
  })

  it('keeps shared free of clock and random', () => {
    const found = filesUnder('shared').filter(file => /Date\.now\(|Math\.random\(|new Date\(\)/.test(readFileSync(file, 'utf8'))).map(file => relative(root, file))
    expect(found).toEqual([])
  })

  it('uses the zod 3 API everywhere, since vee-validate checks nothing with a zod 4 schema', () => {
    const found = [...filesUnder('shared'), ...filesUnder('app'), ...filesUnder('server')].filter(file => /zod\/v4/.test(readFileSync(file, 'utf8')))
    expect(found).toEqual([])
  })

  it('has only pages under app/pages and only routes under server/api and server/routes', () => {
    const pages = filesUnder('app/pages').filter(file => !file.endsWith('.vue'))
    const routes = [...filesUnder('server/api'), ...filesUnder('server/routes')].filter(file => !/export default define(Route|EventHandler)\b/.test(readFileSync(file, 'utf8')))
    expect([...pages, ...routes].map(file => relative(root, file))).toEqual([])
  })
})

describe('routes', () => {
  const routes = filesUnder('server/api').map(file => ({ file, name: relative(join(root, 'server/api'), file), text: readFileSync(file, 'utf8') }))

  it.each(routes)('$name names its method, a row of the permission table, and a schema for what it takes', ({ name, text }) => {
    expect(name).toMatch(/\.(get|post|put|patch|delete)\.ts$/)
    const permission = /defineRoute\(\{ permission: '([\w.]+)'/.exec(text)?.[1]
    expect(permission === 'public' || permission! in PERMISSIONS, `permission of ${name}`).toBe(true)
    if (/\[\w+\]/.test(name)) expect(text, `${name} checks its path`).toMatch(/params[:,]/)
    if (/\.(post|put|patch)\.ts$/.test(name) && !/photos|^check\/index/.test(name)) expect(text, `${name} checks its body`).toMatch(/body[:,]/)
  })

  it('has a row for each in the table that calls every route as every role', () => {
    const table = readFileSync(join(root, 'tests/helpers/routeTable.ts'), 'utf8')
    const missing = [...filesUnder('server/api'), ...filesUnder('server/routes')].map(file => relative(join(root, 'server'), file)).filter(file => !table.includes(`file: '${file}'`))
    expect(missing).toEqual([])
  })

  it('names every permission in at least one route or rule of entries', () => {
    const used = [...routes.map(route => route.text), readFileSync(join(root, 'shared/entry/entryRules.ts'), 'utf8')].join('\n')
    expect(Object.keys(PERMISSIONS).filter(permission => !used.includes(`'${permission}'`))).toEqual([])
  })
})

describe('files', () => {
  it('says at its head why a file is over 400 lines', () => {
    const found = ['shared', 'app', 'server'].flatMap(filesUnder).filter((file) => {
      const lines = readFileSync(file, 'utf8').split('\n')
      return lines.length > 400 && !/^(\/\*\*|\/\/|<!--)/.test(lines.find(line => line.trim() && !line.startsWith('import')) ?? '')
    })
    expect(found.map(file => relative(root, file))).toEqual([])
  })
})

import { posix } from 'node:path'
import ts from 'typescript'

/** The project's own sources by path from the root, with forward slashes. */
export type Sources = ReadonlyMap<string, string>

type Import = { specifier: string; isTypeOnly: boolean; namesZ: boolean }
type Parsed = { imports: Import[]; exportedVerbs: number; lines: number }

/** One rule about what a kind of file may import directly. */
type Direction = {
  from: (path: string) => boolean
  mayNot: (target: string) => boolean
  because: string
}

const databasePackages = /^(@mikro-orm\/|pg$|pg-copy-streams$|knex$)/
const isDatabaseCode = (target: string) =>
  within(target, 'entities', 'migrations', 'lib/db') || databasePackages.test(target)
/** Packages that stay on the server: no page needs 90 to 190 KB of mathjs. */
const serverPackages = /^mathjs(\/|$)/
const isSurface = (target: string) =>
  within(target, 'app', 'components', 'simulators', 'tests') || target === 'server.ts'

const directions: Direction[] = [
  {
    from: (path) => within(path, 'lib/science'),
    mayNot: (target) =>
      isOwn(target)
        ? !within(target, 'lib/science')
        : target.startsWith('node:') || /^(next|react|socket\.io|@mikro-orm)(\/|$|-)/.test(target),
    because: 'lib/science is pure: it imports computing packages and itself',
  },
  {
    from: (path) => within(path, 'entities'),
    mayNot: (target) => isOwn(target) && !within(target, 'entities', 'lib/science'),
    because: 'entities are at the bottom: they import each other and lib/science',
  },
  {
    from: (path) => within(path, 'lib'),
    mayNot: isSurface,
    because: 'lib is below app, server.ts, components and simulators',
  },
  {
    from: (path) => within(path, 'lib') && !within(path, 'lib/db'),
    mayNot: (target) => within(target, 'migrations'),
    because: 'only lib/db runs migrations',
  },
  {
    from: (path) => within(path, 'components'),
    mayNot: (target) =>
      isDatabaseCode(target) || within(target, 'app', 'simulators', 'tests') || target === 'server.ts',
    because: 'components draw: they import no database code and nothing above them',
  },
  {
    from: (path) => within(path, 'app') || path === 'server.ts',
    mayNot: (target) => within(target, 'entities', 'migrations') || databasePackages.test(target),
    because: 'pages, routes and the server reach the database through lib/<area>',
  },
  {
    from: (path) => within(path, 'app') || path === 'server.ts',
    mayNot: (target) => within(target, 'simulators', 'tests'),
    because: 'the product does not depend on its simulators and tests',
  },
  {
    from: (path) => within(path, 'simulators'),
    mayNot: (target) => within(target, 'app', 'components', 'tests') || target === 'server.ts',
    because: 'simulators stand outside: they use lib and the network',
  },
]

// One verb, one file. The edges (auth, http, db and so on) are no verbs.
const areas = [
  'recipes',
  'firings',
  'batches',
  'orders',
  'wood',
  'lab',
  'markers',
  'barrels',
  'probes',
  'compare',
  'certificates',
]
const areaFolders = [...areas, 'accounts', 'site', 'audit'].map((name) => `lib/${name}`)

const longest: { what: (path: string) => boolean; lines: number; name: string }[] = [
  { what: (path) => /^app\/(.*\/)?(page\.tsx|route\.ts)$/.test(path), lines: 40, name: 'a page or route' },
  { what: (path) => path === 'server.ts', lines: 80, name: 'server.ts' },
]

/**
 * Every breach of ENGINEERING's house rules in the sources, each as one sentence that begins with the file's path.
 * Type-only imports count for the direct directions and not for what a component drags in at run time.
 */
export function architectureOffences(sources: Sources): string[] {
  const parsed = new Map([...sources].map(([path, text]) => [path, parse(path, text)]))
  const offences: string[] = []
  for (const [path, file] of parsed) {
    offences.push(...nameOffences(path), ...sizeOffences(path, file), ...importOffences(path, file, sources))
  }
  offences.push(...draggedOffences(parsed, sources))
  return offences.sort()
}

function nameOffences(path: string): string[] {
  const name = posix.basename(path)
  const offences = []
  if (/^index\.(ts|tsx|mts)$/.test(name))
    offences.push(`${path} is an index file: name modules, import them directly`)
  if (/^(utils?|helpers?|misc|common)\.(ts|tsx)$/.test(name))
    offences.push(`${path} has a name that says nothing`)
  const stem = name.replace(/(\.(test|d|config))?\.(ts|tsx|mts|mjs)$/, '')
  if (!/^[\w.[\]]*$/.test(stem.replaceAll('-', '')) || /[A-Z]/.test(stem))
    offences.push(`${path} is not in kebab-case`)
  return offences
}

function sizeOffences(path: string, file: Parsed): string[] {
  const offences = longest
    .filter((limit) => limit.what(path) && file.lines > limit.lines)
    .map((limit) => `${path} has ${file.lines} lines; ${limit.name} has at most ${limit.lines}`)
  if (areaFolders.some((folder) => within(path, folder)) && file.exportedVerbs > 1) {
    offences.push(`${path} exports ${file.exportedVerbs} verbs; a file has one`)
  }
  return offences
}

function importOffences(path: string, file: Parsed, sources: Sources): string[] {
  const offences: string[] = []
  for (const { specifier, namesZ } of file.imports) {
    const target = resolve(path, specifier, sources)
    for (const rule of directions) {
      if (rule.from(path) && rule.mayNot(target)) offences.push(`${path} imports ${target}: ${rule.because}`)
    }
    if (namesZ)
      offences.push(`${path} imports { z } from zod: write import * as z from 'zod' (92 KB against 26)`)
    if (specifier === 'server-only')
      offences.push(`${path} imports server-only, which throws under tsx and vitest`)
    if (specifier.startsWith('../') && !within(path, 'lib/science', 'lib/setup', 'tests/science')) {
      offences.push(`${path} imports ${specifier}: another folder is written @/ and the path from the root`)
    }
    if (specifier.startsWith('@/') && within(path, 'lib/science')) {
      offences.push(`${path} imports ${specifier}: within lib/science imports are relative`)
    }
  }
  return offences
}

/** Database code that a component would bring into the browser through something harmless-looking. */
function draggedOffences(parsed: ReadonlyMap<string, Parsed>, sources: Sources): string[] {
  const offences: string[] = []
  for (const start of [...parsed.keys()].filter((path) => within(path, 'components'))) {
    const via = new Map<string, string>([[start, start]])
    for (const path of via.keys()) {
      for (const { specifier, isTypeOnly } of parsed.get(path)?.imports ?? []) {
        const target = resolve(path, specifier, sources)
        if (isTypeOnly || via.has(target)) continue
        if ((isDatabaseCode(target) && path !== start) || serverPackages.test(target))
          offences.push(`${start} drags in ${target} through ${path}`)
        else via.set(target, path)
      }
    }
  }
  return offences
}

function parse(path: string, text: string): Parsed {
  const source = ts.createSourceFile(path, text, ts.ScriptTarget.Latest, false, scriptKind(path))
  const imports: Import[] = []
  let exportedVerbs = 0
  for (const statement of source.statements) {
    if (ts.isImportDeclaration(statement)) imports.push(readImport(statement))
    else if (
      ts.isExportDeclaration(statement) &&
      statement.moduleSpecifier &&
      ts.isStringLiteral(statement.moduleSpecifier)
    ) {
      imports.push({
        specifier: statement.moduleSpecifier.text,
        isTypeOnly: statement.isTypeOnly,
        namesZ: false,
      })
    } else if (ts.isFunctionDeclaration(statement) && isVerb(statement)) exportedVerbs += 1
  }
  // Walking the whole tree is what costs time, and few files import anything later.
  if (/\bimport\s*\(/.test(text)) collectDynamicImports(source, imports)
  const lines = text.replace(/\n$/, '').split('\n').length
  return { imports, exportedVerbs, lines }
}

function readImport(statement: ts.ImportDeclaration): Import {
  const specifier = ts.isStringLiteral(statement.moduleSpecifier) ? statement.moduleSpecifier.text : ''
  const clause = statement.importClause
  const bindings = clause?.namedBindings
  const names = bindings && ts.isNamedImports(bindings) ? bindings.elements : []
  const isAllTypes = names.length > 0 && !clause?.name && names.every((name) => name.isTypeOnly)
  const isTypeOnly = clause?.phaseModifier === ts.SyntaxKind.TypeKeyword || isAllTypes
  const namesZ = specifier === 'zod' && names.some((name) => (name.propertyName ?? name.name).text === 'z')
  return { specifier, isTypeOnly, namesZ }
}

function collectDynamicImports(node: ts.Node, imports: Import[]): void {
  if (ts.isCallExpression(node) && node.expression.kind === ts.SyntaxKind.ImportKeyword) {
    const [argument] = node.arguments
    if (argument && ts.isStringLiteralLike(argument)) {
      imports.push({ specifier: argument.text, isTypeOnly: false, namesZ: false })
    }
  }
  ts.forEachChild(node, (child) => collectDynamicImports(child, imports))
}

/** A verb does something for somebody: an exported async function whose first parameter is the actor. */
function isVerb(node: ts.FunctionDeclaration): boolean {
  const first = node.parameters[0]?.name
  const isForActor = first !== undefined && ts.isIdentifier(first) && first.text === 'actor'
  return isForActor && has(node, ts.SyntaxKind.ExportKeyword) && has(node, ts.SyntaxKind.AsyncKeyword)
}

function has(node: ts.HasModifiers, kind: ts.SyntaxKind): boolean {
  return ts.getModifiers(node)?.some((modifier) => modifier.kind === kind) ?? false
}

function scriptKind(path: string): ts.ScriptKind {
  return path.endsWith('.tsx') ? ts.ScriptKind.TSX : ts.ScriptKind.TS
}

/** The path from the root of one of our files, or the package's name as it is written. */
function resolve(from: string, specifier: string, sources: Sources): string {
  const isRelative = specifier.startsWith('.')
  if (!isRelative && !specifier.startsWith('@/')) return specifier
  const bare = isRelative ? posix.join(posix.dirname(from), specifier) : specifier.slice(2)
  const candidates = [bare, `${bare}.ts`, `${bare}.tsx`, bare.replace(/\.js$/, '.ts'), `${bare}/index.ts`]
  return candidates.find((path) => sources.has(path)) ?? bare
}

function isOwn(target: string): boolean {
  return (
    within(target, 'app', 'components', 'entities', 'lib', 'migrations', 'simulators', 'tests') ||
    target === 'server.ts'
  )
}

function within(path: string, ...folders: string[]): boolean {
  return folders.some((folder) => path.startsWith(`${folder}/`))
}

import { readdirSync, readFileSync } from 'node:fs'
import { dirname, join, posix } from 'node:path'
import ts from 'typescript'
import { parse as parseVue } from 'vue/compiler-sfc'
import { rootFolder } from '../../../scripts/lib/paths.mjs'

const NOT_OURS = new Set(['node_modules', 'coverage'])

/** Every file of the project by its path from the root; made and installed ones left out. */
export function listProjectFiles(folder = ''): string[] {
  return readdirSync(join(rootFolder, folder), { withFileTypes: true }).flatMap((entry) => {
    const path = posix.join(folder, entry.name)
    if (entry.isDirectory()) {
      const isHidden = entry.name.startsWith('.') && entry.name !== '.ci'
      return isHidden || NOT_OURS.has(entry.name) ? [] : listProjectFiles(path)
    }
    return entry.isFile() ? [path] : []
  })
}

export function readSource(path: string): string {
  return readFileSync(join(rootFolder, path), 'utf8')
}

/** The files that may hold imports. */
export function isCode(path: string): boolean {
  return /\.(ts|mts|mjs|js|vue)$/.test(path) && !path.endsWith('.d.ts')
}

export interface Import {
  /** What stands between the quotes. */
  specifier: string
  /** Where in the project it leads; undefined for a package. */
  target: string | undefined
  /** Erased by the compiler: no code is loaded. */
  typeOnly: boolean
}

/** Every import of a file: static, re-export, dynamic and within types. */
export function listImports(path: string, source = readSource(path)): Import[] {
  const imports: Import[] = []
  for (const script of scriptsOf(path, source)) {
    const file = ts.createSourceFile(path, script, ts.ScriptTarget.Latest, false, ts.ScriptKind.TS)
    const visit = (node: ts.Node): void => {
      const found = readImport(node)
      if (found !== undefined) imports.push({ ...found, target: resolveTarget(path, found.specifier) })
      ts.forEachChild(node, visit)
    }
    visit(file)
  }
  return imports
}

function scriptsOf(path: string, source: string): string[] {
  if (!path.endsWith('.vue')) return [source]
  const { script, scriptSetup } = parseVue(source).descriptor
  return [script, scriptSetup].flatMap((block) =>
    block === null || block === undefined ? [] : [block.content],
  )
}

function readImport(node: ts.Node): { specifier: string; typeOnly: boolean } | undefined {
  if (ts.isImportDeclaration(node) && ts.isStringLiteral(node.moduleSpecifier)) {
    return { specifier: node.moduleSpecifier.text, typeOnly: isTypeOnlyClause(node.importClause) }
  }
  if (
    ts.isExportDeclaration(node) &&
    node.moduleSpecifier !== undefined &&
    ts.isStringLiteral(node.moduleSpecifier)
  ) {
    return { specifier: node.moduleSpecifier.text, typeOnly: node.isTypeOnly }
  }
  if (ts.isCallExpression(node) && node.expression.kind === ts.SyntaxKind.ImportKeyword) {
    const [argument] = node.arguments
    if (argument !== undefined && ts.isStringLiteralLike(argument)) {
      return { specifier: argument.text, typeOnly: false }
    }
  }
  if (
    ts.isImportTypeNode(node) &&
    ts.isLiteralTypeNode(node.argument) &&
    ts.isStringLiteral(node.argument.literal)
  ) {
    return { specifier: node.argument.literal.text, typeOnly: true }
  }
  return undefined
}

function isTypeOnlyClause(clause: ts.ImportClause | undefined): boolean {
  if (clause === undefined) return false
  if (clause.isTypeOnly) return true
  const { namedBindings } = clause
  return (
    clause.name === undefined &&
    namedBindings !== undefined &&
    ts.isNamedImports(namedBindings) &&
    namedBindings.elements.length > 0 &&
    namedBindings.elements.every((element) => element.isTypeOnly)
  )
}

function resolveTarget(path: string, specifier: string): string | undefined {
  if (specifier.startsWith('.')) return posix.join(dirname(path), specifier)
  const alias = /^(?:#shared|~~|~|@@|@)\/(.*)$/.exec(specifier)
  if (alias === null) return undefined
  return specifier.startsWith('#shared/') ? `shared/${alias[1]}` : alias[1]
}

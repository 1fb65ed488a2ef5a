import ts from 'typescript'

/** What a test file says of published checks and laws, read from its text. */
export type ScienceTestFile = {
  /** Computations whose published checks it runs. */
  computations: string[]
  /** Faults of the file itself, each a sentence. */
  faults: string[]
}

const isTestCall = (node: ts.Node): node is ts.CallExpression =>
  ts.isCallExpression(node) && ts.isIdentifier(node.expression) && /^(it|test)$/.test(node.expression.text)

const isCallOf = (name: string, node: ts.Node): node is ts.CallExpression =>
  ts.isCallExpression(node) && ts.isIdentifier(node.expression) && node.expression.text === name

function visitAll(node: ts.Node, visit: (node: ts.Node) => void): void {
  visit(node)
  ts.forEachChild(node, (child) => visitAll(child, visit))
}

/** Names of the file's own functions that hand their first argument on to `testPublished`, and those arguments. */
function wrappersOf(file: ts.SourceFile): { names: Set<string>; handedOn: Set<ts.Node> } {
  const names = new Set<string>()
  const handedOn = new Set<ts.Node>()
  visitAll(file, (node) => {
    if (!ts.isVariableDeclaration(node) || !ts.isIdentifier(node.name)) return
    const { name, initializer } = node
    if (initializer === undefined || !ts.isArrowFunction(initializer)) return
    const first = initializer.parameters[0]?.name.getText()
    visitAll(initializer, (inner) => {
      if (!isCallOf('testPublished', inner)) return
      const argument = inner.arguments[0]
      if (argument === undefined || argument.getText() !== first) return
      names.add(name.text)
      handedOn.add(argument)
    })
  })
  return { names, handedOn }
}

/**
 * Reads a test file without running it: the computations that it gives to `testPublished`, and its faults: one that
 * cannot be read from the text, a test left out (`skip`, `todo`, `only`), a test of a law that is not named `law:`, or
 * one so named that runs no property.
 */
export function readScienceTestFile(path: string, text: string): ScienceTestFile {
  const file = ts.createSourceFile(path, text, ts.ScriptTarget.Latest, true)
  const { names, handedOn } = wrappersOf(file)
  const computations: string[] = []
  const faults: string[] = []
  visitAll(file, (node) => {
    if (!ts.isCallExpression(node)) return
    const [first, body] = node.arguments
    const isPublished = ts.isIdentifier(node.expression) && names.has(node.expression.text)
    if (first && (isPublished || isCallOf('testPublished', node))) {
      if (ts.isStringLiteralLike(first)) computations.push(first.text)
      else if (!handedOn.has(first))
        faults.push(`${path} gives testPublished ${first.getText()}, which is not written out`)
    }
    if (/^(it|test|describe)\.(skip|todo|only|fails)\b/.test(node.expression.getText()))
      faults.push(`${path} has ${node.expression.getText()}`)
    if (isTestCall(node) && first && body && ts.isStringLiteralLike(first)) {
      const runsProperty = /\bfc\s*\.\s*assert\b/.test(body.getText())
      if (runsProperty !== first.text.startsWith('law: '))
        faults.push(
          runsProperty
            ? `${path}: “${first.text}” runs a property, so its name begins with “law: ”`
            : `${path}: “${first.text}” is named a law and runs no property`,
        )
    }
  })
  return { computations, faults }
}

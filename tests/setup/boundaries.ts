import { dirname, join, normalize } from 'node:path';
import ts from 'typescript';
import { layers, type Layer } from './layers';

/** An import as it stands in a file. */
interface Import {
  specifier: string;
  isTypeOnly: boolean;
}

/** The TypeScript in an .astro file: its frontmatter and its scripts. */
function codeOfAstro(text: string): string {
  const frontmatter = /^\s*---\r?\n([\s\S]*?)\r?\n---/.exec(text)?.[1] ?? '';
  const scripts = [...text.matchAll(/<script\b[^>]*>([\s\S]*?)<\/script>/g)].map((match) => match[1] ?? '');
  return [frontmatter, ...scripts].join('\n;\n');
}

/** Every import, re-export and `import()` of a file, types in `import('…')` included. */
function importsOf(path: string, text: string): Import[] {
  const code = path.endsWith('.astro') ? codeOfAstro(text) : text;
  const source = ts.createSourceFile('file.tsx', code, ts.ScriptTarget.Latest, true, ts.ScriptKind.TSX);
  const found: Import[] = [];
  const add = (node: ts.Node | undefined, isTypeOnly: boolean): void => {
    if (node && ts.isStringLiteralLike(node)) found.push({ specifier: node.text, isTypeOnly });
  };
  const visit = (node: ts.Node): void => {
    if (ts.isImportDeclaration(node)) {
      const clause = node.importClause;
      const named = clause?.namedBindings;
      const allTypes =
        clause !== undefined &&
        clause.name === undefined &&
        named !== undefined &&
        ts.isNamedImports(named) &&
        named.elements.length > 0 &&
        named.elements.every((element) => element.isTypeOnly);
      add(node.moduleSpecifier, clause?.phaseModifier === ts.SyntaxKind.TypeKeyword || allTypes);
    } else if (ts.isExportDeclaration(node)) add(node.moduleSpecifier, node.isTypeOnly);
    else if (ts.isImportTypeNode(node) && ts.isLiteralTypeNode(node.argument))
      add(node.argument.literal, true);
    else if (ts.isCallExpression(node) && node.expression.kind === ts.SyntaxKind.ImportKeyword) {
      add(node.arguments[0], false);
    }
    ts.forEachChild(node, visit);
  };
  visit(source);
  return found;
}

const bare = (path: string): string => path.replace(/\.(ts|tsx|astro|mjs|css)$/, '');
const layerOf = (path: string): Layer | undefined => layers.find(({ matches }) => matches.test(bare(path)));

function faultOf(path: string, { specifier, isTypeOnly }: Import): string | undefined {
  const own = layerOf(path);
  if (!own) return undefined;
  const isOurs = specifier.startsWith('~/') || specifier.startsWith('.');
  if (!isOurs) {
    if (!own.packages || own.packages.test(specifier)) return undefined;
    return `imports ${specifier}, and ${own.name} may not import that package`;
  }
  const target = specifier.startsWith('~/') ? specifier.slice(2) : normalize(join(dirname(path), specifier));
  if (specifier.startsWith('.') && dirname(target) !== dirname(path)) {
    // The stand-ins lie outside of src, where the alias does not reach.
    if (own.name === 'run' && target.startsWith('../local-fakes/')) return undefined;
    return `imports ${specifier}: another folder is named by ~/…`;
  }
  if (/\.(ts|tsx)$/.test(specifier)) return `imports ${specifier}: leave the extension out`;
  // A folder stands for its index.
  const name = (layerOf(target) ?? layerOf(`${target}/index`))?.name;
  if (name === undefined) return `imports ${specifier}, which is in no layer`;
  if (name === own.name || own.imports.includes(name)) return undefined;
  if (isTypeOnly && own.imports.includes(`types:${name}`)) return undefined;
  const typesOnly = own.imports.includes(`types:${name}`) ? ' other than types' : '';
  return `imports ${specifier}, and ${own.name} may import nothing of ${name}${typesOnly}`;
}

/** Whether a file only passes on what others export. */
function isBarrel(text: string): boolean {
  const source = ts.createSourceFile('file.ts', text, ts.ScriptTarget.Latest, true);
  return (
    source.statements.length > 0 &&
    source.statements.every((statement) => ts.isExportDeclaration(statement) && statement.moduleSpecifier)
  );
}

/**
 * Everything in a source file that the layers forbid.
 *
 * @param path in `src/`
 * @returns a sentence each
 */
export function boundaryFaults(path: string, text: string): string[] {
  if (!layerOf(path)) return [`src/${path} is in no layer`];
  const faults = importsOf(path, text).flatMap((one) => faultOf(path, one) ?? []);
  if (path !== 'server/db/schema/index.ts' && path.endsWith('.ts') && isBarrel(text)) {
    faults.push('only passes on what others export');
  }
  return faults.map((fault) => `src/${path} ${fault}`);
}

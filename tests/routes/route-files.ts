import { existsSync, readdirSync, readFileSync } from 'node:fs';
import { dirname, join, relative, sep } from 'node:path';
import ts from 'typescript';

/** A route as its files make it. */
export interface RouteFiles {
  /** As the framework names it: "/(app)/studies/[study]". */
  readonly id: string;
  readonly isPage: boolean;
  /** Names of the form actions of the page. */
  readonly actions: readonly string[];
  /** Methods of the endpoint. */
  readonly methods: readonly string[];
}

const folder = 'src/routes';
const methods = new Set(['GET', 'HEAD', 'POST', 'PUT', 'PATCH', 'DELETE', 'OPTIONS', 'fallback']);

function parsed(path: string): ts.SourceFile {
  return ts.createSourceFile(path, readFileSync(path, 'utf8'), ts.ScriptTarget.Latest, true);
}

interface Exported {
  readonly name: string;
  readonly value: ts.Expression | undefined;
}

function exportsOf(file: ts.SourceFile): readonly Exported[] {
  return file.statements.flatMap((statement): readonly Exported[] => {
    const isExported =
      ts.canHaveModifiers(statement) &&
      ts.getModifiers(statement)?.some(({ kind }) => kind === ts.SyntaxKind.ExportKeyword);
    if (ts.isVariableStatement(statement) && isExported) {
      return statement.declarationList.declarations.map(({ name, initializer }) => ({
        name: name.getText(),
        value: initializer
      }));
    }
    if (ts.isFunctionDeclaration(statement) && isExported) {
      return [{ name: statement.name?.text ?? '', value: undefined }];
    }
    if (ts.isExportDeclaration(statement)) {
      throw new Error(
        `${file.fileName}: what it passes on cannot be read here; export it by its own declaration`
      );
    }
    return [];
  });
}

function literalOf(value: ts.Expression | undefined): ts.ObjectLiteralExpression | null {
  if (value === undefined) return null;
  if (ts.isSatisfiesExpression(value) || ts.isAsExpression(value) || ts.isParenthesizedExpression(value)) {
    return literalOf(value.expression);
  }
  return ts.isObjectLiteralExpression(value) ? value : null;
}

function actionsIn(path: string): readonly string[] {
  if (!existsSync(path)) return [];
  const actions = exportsOf(parsed(path)).find(({ name }) => name === 'actions');
  if (!actions) return [];
  const literal = literalOf(actions.value);
  if (!literal) throw new Error(`${path}: the actions must be written out as an object`);
  return literal.properties.map((property) => {
    const { name } = property;
    if (!name || ts.isComputedPropertyName(name)) throw new Error(`${path}: an action without a plain name`);
    return ts.isStringLiteral(name) ? name.text : name.getText();
  });
}

function methodsIn(path: string): readonly string[] {
  if (!existsSync(path)) return [];
  return exportsOf(parsed(path))
    .map(({ name }) => name)
    .filter((name) => methods.has(name));
}

/** Every route that the framework would find under src/routes, layouts without a page left out. */
export function findRoutes(): readonly RouteFiles[] {
  const files = readdirSync(folder, { recursive: true, encoding: 'utf8' });
  const folders = new Set(
    files
      .filter((file) => /(^|[\\/])\+(page|server)(@[^.]*)?(\.server)?\.(svelte|ts|js)$/.test(file))
      .map(dirname)
  );
  return [...folders].sort().map((route) => {
    const at = join(folder, route);
    const names = readdirSync(at);
    return {
      id: route === '.' ? '/' : `/${relative(folder, at).split(sep).join('/')}`,
      isPage: names.some((name) => name.startsWith('+page')),
      actions: actionsIn(join(at, '+page.server.ts')),
      methods: methodsIn(join(at, '+server.ts'))
    };
  });
}

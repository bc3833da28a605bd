/** Every way into the product, read from the files of src/routes: pages, methods of endpoints, and actions of forms. */
import { readdirSync, readFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import ts from 'typescript';

const folder = fileURLToPath(new URL('../../src/routes', import.meta.url));
const METHODS = ['GET', 'HEAD', 'POST', 'PUT', 'PATCH', 'DELETE', 'OPTIONS', 'fallback'];

function parse(file: string): ts.SourceFile {
  const text = readFileSync(join(folder, file), 'utf8');
  return ts.createSourceFile(file, text, ts.ScriptTarget.Latest, true);
}

/** The variables and functions that a file exports. */
function exportsOf(source: ts.SourceFile) {
  const isExported = (node: ts.Node) =>
    ts.canHaveModifiers(node) &&
    (ts.getModifiers(node) ?? []).some(({ kind }) => kind === ts.SyntaxKind.ExportKeyword);
  return source.statements.filter(isExported).flatMap((statement) => {
    if (ts.isVariableStatement(statement)) {
      return statement.declarationList.declarations.map((declared) => ({
        name: declared.name.getText(source),
        value: declared.initializer,
      }));
    }
    if (ts.isFunctionDeclaration(statement) && statement.name) {
      return [{ name: statement.name.text, value: undefined }];
    }
    return [];
  });
}

function actionsOf(file: string, route: string): string[] {
  const declared = exportsOf(parse(file)).find(({ name }) => name === 'actions');
  if (!declared) return [];
  if (!declared.value || !ts.isObjectLiteralExpression(declared.value)) {
    throw new Error(`${file}: write the actions as one object, so that each can be found.`);
  }
  return declared.value.properties.map((property) => {
    const name = property.name?.getText() ?? '';
    return name === 'default' ? `POST ${route}` : `POST ${route}?/${name}`;
  });
}

/** All ways in, like `GET /(app)/desk`, `POST /(app)/team?/invite` or `POST /sign-out`, in order. */
export function listWaysIn(): string[] {
  const files = readdirSync(folder, { recursive: true, encoding: 'utf8' });
  const found = files.flatMap((file) => {
    const route = `/${dirname(file)}`.replace(/\/[.]$/, '/');
    if (/(^|\/)[+]page[.]svelte$/.test(file)) return [`GET ${route}`];
    if (/(^|\/)[+]page[.]server[.]ts$/.test(file)) return actionsOf(file, route);
    if (!/(^|\/)[+]server[.]ts$/.test(file)) return [];
    const names = exportsOf(parse(file)).map(({ name }) => name);
    return METHODS.filter((method) => names.includes(method)).map((name) => `${name} ${route}`);
  });
  return [...new Set(found)].sort();
}

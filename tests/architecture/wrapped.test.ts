import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import ts from 'typescript';

const ROOT = path.resolve(__dirname, '../..');
const METHODS = ['GET', 'HEAD', 'POST', 'PUT', 'PATCH', 'DELETE', 'OPTIONS'];

/** The one handler that is somebody else's: next-auth checks origin, token and method itself, sign-in is throttled. */
const NOT_OURS = ['app/api/auth/[...nextauth]/route.ts'];

interface Exported {
  file: string;
  name: string;
  /** The function a const is made by, like defineAction; null for anything else. */
  madeBy: string | null;
}

function filesNamed(name: string): string[] {
  return readdirSync(path.join(ROOT, 'app'), { recursive: true, encoding: 'utf8' })
    .filter((file) => path.basename(file) === name)
    .map((file) => path.posix.join('app', file));
}

/** Every value a file exports, however it is written. */
function exportsOf(file: string): Exported[] {
  const source = ts.createSourceFile(
    file,
    readFileSync(path.join(ROOT, file), 'utf8'),
    ts.ScriptTarget.Latest,
    true,
  );
  const found: Exported[] = [];
  const add = (name: string, madeBy: string | null) => void found.push({ file, name, madeBy });
  const isExported = (node: ts.Statement) =>
    ts.canHaveModifiers(node) &&
    Boolean(ts.getModifiers(node)?.some(({ kind }) => kind === ts.SyntaxKind.ExportKeyword));
  for (const statement of source.statements) {
    if (ts.isExportAssignment(statement)) add('default', null);
    else if (ts.isExportDeclaration(statement) && !statement.isTypeOnly) {
      const clause = statement.exportClause;
      if (clause && ts.isNamedExports(clause))
        for (const element of clause.elements) add(element.name.text, null);
      else add('*', null);
    } else if (!isExported(statement)) continue;
    else if (ts.isVariableStatement(statement)) {
      for (const { name, initializer } of statement.declarationList.declarations) {
        const call =
          initializer && ts.isCallExpression(initializer) ? initializer.expression.getText(source) : null;
        add(name.getText(source), call);
      }
    } else if (ts.isFunctionDeclaration(statement) || ts.isClassDeclaration(statement))
      add(statement.name?.text ?? 'default', null);
  }
  return found;
}

const handlers = filesNamed('route.ts')
  .filter((file) => !NOT_OURS.includes(file))
  .flatMap(exportsOf)
  .filter(({ name }) => METHODS.includes(name) || name === '*');
const actions = filesNamed('actions.ts').flatMap(exportsOf);

test('there are handlers and actions to look at', () => {
  expect(handlers.length).toBeGreaterThanOrEqual(7);
  expect(actions.length).toBeGreaterThanOrEqual(18);
});

test.each(handlers)('$file $name goes through the route wrapper', ({ madeBy }) => {
  expect(['defineRoute', 'defineOpenRoute']).toContain(madeBy);
});

test.each(actions)('$file $name goes through the action wrapper', ({ madeBy }) => {
  expect(['defineAction', 'defineOpenAction']).toContain(madeBy);
});

test('only the door and the health check are open to anyone', () => {
  const open = [...handlers, ...actions].filter(({ madeBy }) => madeBy?.startsWith('defineOpen'));
  expect(open.map(({ file, name }) => `${file} ${name}`).sort()).toEqual([
    'app/(door)/actions.ts askReset',
    'app/(door)/actions.ts createFirstAdmin',
    'app/(door)/actions.ts resetPassword',
    'app/api/health/route.ts GET',
  ]);
});

test('server functions written inside a page or component are no way around the wrapper', () => {
  const inline = ['app', 'components', 'lib'].flatMap((folder) =>
    readdirSync(path.join(ROOT, folder), { recursive: true, encoding: 'utf8' })
      .filter((file) => /\.tsx?$/.test(file) && path.basename(file) !== 'actions.ts')
      .filter((file) => /^\s*['"]use server['"]/m.test(readFileSync(path.join(ROOT, folder, file), 'utf8')))
      .map((file) => path.posix.join(folder, file)),
  );
  expect(inline).toEqual([]);
});

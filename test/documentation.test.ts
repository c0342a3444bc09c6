import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import ts from 'typescript';
import { describe, expect, it } from 'vitest';

const folders = ['src', 'app/host', 'app/loopback', 'app/main', 'app/preload'];

function sources(folder: string): string[] {
  return readdirSync(folder, { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile() && /\.tsx?$/.test(entry.name))
    .map((entry) => join(entry.parentPath, entry.name));
}

/** Names of the exported functions, classes and interfaces of a file that no doc comment explains. */
function undocumented(path: string): string[] {
  const source = ts.createSourceFile(path, readFileSync(path, 'utf8'), ts.ScriptTarget.ES2023, true);
  return source.statements.flatMap((statement) => {
    const speaks =
      ts.isFunctionDeclaration(statement) || ts.isClassDeclaration(statement) || ts.isInterfaceDeclaration(statement);
    if (!speaks || !statement.modifiers?.some((m) => m.kind === ts.SyntaxKind.ExportKeyword)) return [];
    return ts.getJSDocCommentsAndTags(statement).length > 0 ? [] : [`${path}: ${statement.name?.text ?? 'default'}`];
  });
}

describe('documentation', () => {
  it('explains every exported function, class and interface', () => {
    const files = folders.flatMap(sources);
    expect(files.length).toBeGreaterThan(20);
    expect(files.flatMap(undocumented)).toEqual([]);
  });
});

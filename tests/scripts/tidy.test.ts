import { existsSync, readdirSync, readFileSync, statSync } from 'node:fs';
import path from 'node:path';
import { describe, expect, test } from 'vitest';

/** House rules that no other tool looks after: no circles, no file that nobody uses, no test switched off, no long file. */
const PROJECT = path.resolve(import.meta.dirname, '../..');
const FOLDERS = ['analysis', 'app', 'components', 'db', 'editor', 'scripts', 'tests', 'ws-server'];
const LINES_MAX = 400;

function listFiles(folder: string): string[] {
  return readdirSync(path.join(PROJECT, folder), { withFileTypes: true }).flatMap((entry) => {
    const name = path.join(folder, entry.name);
    if (entry.isDirectory()) return name === path.join('tests', 'fixtures') ? [] : listFiles(name);
    return /\.(ts|tsx|mjs|css)$/.test(entry.name) ? [name] : [];
  });
}

const rootFiles = readdirSync(PROJECT).filter(
  (name) => /\.(ts|tsx|mjs)$/.test(name) && name !== 'next-env.d.ts',
);
const files = [
  ...FOLDERS.filter((folder) => existsSync(path.join(PROJECT, folder))).flatMap(listFiles),
  ...rootFiles,
];
const texts = new Map(files.map((file) => [file, readFileSync(path.join(PROJECT, file), 'utf8')]));

/** The project's file behind an import's words; null for a package. */
function resolveImport(from: string, words: string): string | null {
  const base = words.startsWith('@/')
    ? words.slice(2)
    : words.startsWith('.')
      ? path.join(path.dirname(from), words)
      : null;
  if (base === null) return null;
  const candidates = [base, `${base}.ts`, `${base}.tsx`, `${base}.mjs`, path.join(base, 'index.ts')];
  return candidates.find((name) => texts.has(name)) ?? null;
}

const STATEMENT = /(?:^|\n)\s*(?:import|export)\s+(type\s)?(?:[^'";]*?\sfrom\s+)?['"]([^'"]+)['"]/g;
const CALL = /(?:\bimport\(|@import\s+|new URL\(|vi\.mock\(|importActual[^(]*\()\s*['"]([^'"]+)['"]/g;

function imports(file: string, options: { types: boolean }): string[] {
  const text = texts.get(file) ?? '';
  const statements = [...text.matchAll(STATEMENT)].filter((match) => options.types || !match[1]);
  const words = [
    ...statements.map((match) => match[2]),
    ...[...text.matchAll(CALL)].map((match) => match[1]),
  ];
  return words.flatMap((word) => resolveImport(file, word ?? '') ?? []);
}

test('no file imports itself by way of others', () => {
  const state = new Map<string, 'open' | 'done'>();
  const circles: string[] = [];
  const visit = (file: string, trail: readonly string[]): void => {
    if (state.get(file) === 'done') return;
    if (state.get(file) === 'open') {
      circles.push([...trail.slice(trail.indexOf(file)), file].join(' → '));
      return;
    }
    state.set(file, 'open');
    for (const next of imports(file, { types: false })) visit(next, [...trail, file]);
    state.set(file, 'done');
  };
  for (const file of files) visit(file, []);
  expect(circles).toEqual([]);
});

test('every file is used: imported, started by name, or known to the framework', () => {
  const imported = new Set(files.flatMap((file) => imports(file, { types: true })));
  const framework =
    /(^|\/)(page|layout|route|loading|error|global-error|not-found|template|default)\.tsx?$|\.(test|config)\.(ts|tsx|mjs)$/;
  // Names of programs as they stand in package.json, in the vitest configuration and where processes are started.
  const named = [...texts.values(), readFileSync(path.join(PROJECT, 'package.json'), 'utf8')].join('\n');
  const unused = files.filter((file) => {
    if (imported.has(file) || framework.test(file) || file === 'proxy.ts') return false;
    return (
      !named.includes(`'${file}'`) &&
      !named.includes(`/${file}'`) &&
      !new RegExp(`[ /]${file}["' ]`).test(named)
    );
  });
  expect(unused).toEqual([]);
});

describe('in every file', () => {
  const own = path.join('tests', 'scripts', 'tidy.test.ts');
  const others = files.filter((file) => file !== own);

  test('no test is switched on alone, and none is switched off without a reason', () => {
    const alone = others.filter((file) => /\b(test|it|describe)\.only\b/.test(texts.get(file) ?? ''));
    expect(alone).toEqual([]);
    const silent = others.filter((file) => /\b(test|it|describe)\.(skip|todo)\(/.test(texts.get(file) ?? ''));
    expect(silent).toEqual([]);
  });

  test('nothing is left for later', () => {
    expect(others.filter((file) => /\b(TODO|FIXME|XXX)\b/.test(texts.get(file) ?? ''))).toEqual([]);
  });

  test(`there are at most ${LINES_MAX} lines`, () => {
    const long = files.filter((file) => (texts.get(file) ?? '').split('\n').length - 1 > LINES_MAX);
    expect(long).toEqual([]);
  });

  test('every listed folder was looked through', () => {
    for (const folder of FOLDERS)
      expect(statSync(path.join(PROJECT, folder)).isDirectory(), folder).toBe(true);
    expect(files.length).toBeGreaterThan(100);
  });
});

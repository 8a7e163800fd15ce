import { readdirSync, readFileSync } from 'node:fs';
import { dirname, join, normalize, relative } from 'node:path';
import { fileURLToPath } from 'node:url';

export const ROOT = fileURLToPath(new URL('../..', import.meta.url));

export interface Import {
  /** A file of the project by its path from the root, without extension; or a package's name. */
  readonly to: string;
  readonly isPackage: boolean;
  /** Erased when compiled: it ties words, not behaviour. */
  readonly typeOnly: boolean;
}
export interface SourceFile { readonly path: string; readonly text: string; readonly imports: readonly Import[] }

const ALIASES: Record<string, string> = { '#shared/': 'shared/', '#backend/': 'backend/src/', '#engine/': 'backend/src/engine/', '#dev-idp/': 'dev-idp/' };
const withoutExtension = (path: string) => path.replace(/\.(d\.ts|tsx?|mjs|js)$/, '');

/** All files below a folder whose names end in one of the endings, sorted. */
export function filesBelow(folder: string, endings: readonly string[]): string[] {
  return readdirSync(join(ROOT, folder), { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile() && endings.some((ending) => entry.name.endsWith(ending)))
    .map((entry) => relative(ROOT, join(entry.parentPath, entry.name)))
    .filter((path) => !path.includes('node_modules')).toSorted();
}

export function sourceFiles(folder: string): SourceFile[] {
  return filesBelow(folder, ['.ts', '.tsx']).map((path) => {
    const text = readFileSync(join(ROOT, path), 'utf8');
    return { path, text, imports: importsOf(path, text) };
  });
}

function importsOf(path: string, text: string): Import[] {
  const statements = [...text.matchAll(/^(?:import|export)\s+(type\s+)?(?:[^'"]*?\sfrom\s+)?['"]([^'"\n]+)['"]/gm)];
  const calls = [...text.matchAll(/\bimport\(\s*['"]([^'"\n]+)['"]\s*\)/g)].map(([, to]) => ['', undefined, to]);
  return [...statements, ...calls].map(([whole, type, to]) => ({ ...resolved(path, String(to)), typeOnly: type !== undefined || onlyTypes(String(whole)) }));
}

/** `import { type A, type B } from …`: every name is a type. */
function onlyTypes(statement: string): boolean {
  const names = /^import\s*\{([^}]*)\}/.exec(statement)?.[1]?.split(',').map((name) => name.trim()).filter(Boolean);
  return names !== undefined && names.length > 0 && names.every((name) => name.startsWith('type '));
}

function resolved(path: string, to: string): { to: string; isPackage: boolean } {
  if (to.startsWith('.')) return { to: withoutExtension(normalize(join(dirname(path), to))), isPackage: false };
  const alias = Object.keys(ALIASES).find((prefix) => to.startsWith(prefix));
  return alias ? { to: ALIASES[alias] + to.slice(alias.length), isPackage: false } : { to, isPackage: true };
}

export const nameOf = (file: Pick<SourceFile, 'path'>) => withoutExtension(file.path);

/** The room below backend/src in which a file lies; '' for the files that start a process. */
export function roomOf(path: string): string {
  return /^backend\/src\/([^/]+)\//.exec(path)?.[1] ?? '';
}

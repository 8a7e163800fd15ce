import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { filesBelow, nameOf, ROOT, roomOf, sourceFiles, type Import, type SourceFile } from './source-files.js';

const backend = sourceFiles('backend/src');
const frontend = sourceFiles('frontend/src');
const shared = sourceFiles('shared');
const provider = sourceFiles('dev-idp');
const everything = [...backend, ...frontend, ...shared, ...provider];
const byName = new Map(everything.map((file) => [nameOf(file), file]));
const inRoom = (...rooms: string[]) => backend.filter(({ path }) => rooms.includes(roomOf(path)));

/** `FILE > IMPORT` for each import that the rule does not allow. */
function breaks(files: readonly SourceFile[], allowed: (imported: Import, file: SourceFile) => boolean): string[] {
  return files.flatMap((file) => file.imports.filter((imported) => !allowed(imported, file)).map(({ to }) => `${file.path} > ${to}`));
}
const below = (imported: Import, ...folders: string[]) => !imported.isPackage && folders.some((folder) => imported.to.startsWith(folder));
const named = (imported: Import, ...packages: string[]) => imported.isPackage && packages.includes(imported.to);

describe('the reader of sources', () => {
  it('sees the project and resolves what it imports', () => {
    expect(backend.length).toBeGreaterThan(200);
    expect(frontend.length).toBeGreaterThan(100);
    const dangling = everything.flatMap((file) => file.imports.filter(({ to, isPackage }) => !isPackage && !byName.has(to)
      && !['', '.css', '.json', '.mjs', '.d.ts'].some((ending) => existsSync(join(ROOT, to + ending)))).map(({ to }) => `${file.path} > ${to}`));
    expect(dangling).toEqual([]);
  });
});

describe('imports', () => {
  it('of the engine: itself, the shared words, and its transform', () => {
    expect(inRoom('engine').length).toBeGreaterThan(50);
    expect(breaks(inRoom('engine'), (to) => below(to, 'backend/src/engine/', 'shared/') || named(to, 'fft.js'))).toEqual([]);
  });

  it('of snapshots: themselves, the shared words, and the two parsers', () => {
    expect(breaks(inRoom('snapshots'), (to) => below(to, 'backend/src/snapshots/', 'shared/') || named(to, 'yaml', 'saxes'))).toEqual([]);
  });

  it('of hints: themselves, the shared words, what snapshots say, and the engine\'s types', () => {
    expect(breaks(inRoom('hints'), (to) => below(to, 'backend/src/hints/', 'backend/src/snapshots/', 'shared/') || (below(to, 'backend/src/engine/') && to.typeOnly))).toEqual([]);
  });

  it('of the generator: nothing of the engine, whose witness it is', () => {
    expect(inRoom('generator').length).toBeGreaterThan(20);
    expect(breaks(inRoom('generator'), (to) => below(to, 'backend/src/generator/', 'shared/') || (to.isPackage && to.to.startsWith('node:')))).toEqual([]);
    expect(breaks(inRoom('engine'), (to) => !below(to, 'backend/src/generator/'))).toEqual([]);
  });

  it('of shared: itself and zod', () => {
    expect(breaks(shared, (to) => below(to, 'shared/') || named(to, 'zod'))).toEqual([]);
  });

  it('of the pages: themselves, shared, and packages', () => {
    expect(breaks(frontend, (to) => to.isPackage ? !to.to.startsWith('node:') : below(to, 'frontend/', 'shared/'))).toEqual([]);
  });

  it('of the local identity provider: itself, shared, and packages', () => {
    expect(breaks(provider, (to) => to.isPackage || below(to, 'dev-idp/', 'shared/'))).toEqual([]);
  });
});

const FEATURES = ['account', 'decodes', 'files', 'issues', 'links', 'live', 'mail', 'moves', 'overview', 'programmes', 'threads'];
/** What a feature offers to others; the rest of it is its own. */
const DOORS: Record<string, readonly string[]> = {
  // An issue's history, its standing and its ladder belong to whatever happens on it; the day sheet lists as the register does.
  issues: ['record', 'standing', 'rungs', 'register-repository'],
  files: ['attach-file', 'file-queries', 'storage'],
  decodes: ['request-decode', 'decode-queries'],
  moves: ['move-issue', 'next-move', 'retest', 'stage-table'],
};

describe('features', () => {
  it('go into each other by their doors alone', () => {
    expect(breaks(inRoom(...FEATURES), (to, file) => {
      const room = roomOf(`${to.to}.ts`);
      return to.isPackage || !FEATURES.includes(room) || room === roomOf(file.path) || (DOORS[room] ?? []).some((door) => to.to === `backend/src/${room}/${door}`);
    })).toEqual([]);
  });

  it('have no door that nobody uses', () => {
    const used = new Set(inRoom(...FEATURES).flatMap((file) => file.imports.filter(({ to }) => roomOf(`${to}.ts`) !== roomOf(file.path)).map(({ to }) => to)));
    expect(Object.entries(DOORS).flatMap(([room, doors]) => doors.map((door) => `backend/src/${room}/${door}`)).filter((door) => !used.has(door))).toEqual([]);
  });
});

/** Everything that runs when a file is loaded: imports that are not erased, followed to their ends. */
function loadedBy(start: string): Set<string> {
  const loaded = new Set<string>();
  const open = [start];
  for (let name = open.pop(); name !== undefined; name = open.pop()) {
    if (loaded.has(name)) continue;
    loaded.add(name);
    for (const { to, isPackage, typeOnly } of byName.get(name)?.imports ?? []) if (!isPackage && !typeOnly) open.push(to);
  }
  return loaded;
}

describe('processes', () => {
  it.each(['main', 'worker'])('%s never loads the engine: it runs in threads of its own', (start) => {
    const loaded = loadedBy(`backend/src/${start}`);
    expect(loaded.size).toBeGreaterThan(10);
    expect([...loaded].filter((name) => /^backend\/src\/(engine|generator|captures)\//.test(name))).toEqual([]);
    expect(loadedBy('backend/src/decodes/decode-thread').has('backend/src/engine/analyse')).toBe(true);
  });

  it('threads never load the database', () => {
    for (const thread of ['decodes/decode-thread', 'files/reading-thread']) {
      const reached = [...loadedBy(`backend/src/${thread}`)];
      expect(reached.filter((name) => /^backend\/src\/(db|http|access)\//.test(name))).toEqual([]);
      expect(reached.flatMap((name) => byName.get(name)?.imports ?? []).filter(({ to, typeOnly }) => !typeOnly && ['pg', 'sequelize', 'express'].includes(to))).toEqual([]);
    }
  });

  it('load nothing in a circle', () => {
    expect(circles(({ typeOnly }) => !typeOnly)).toEqual([]);
  });

  it('have no circle between rooms, not even of types', () => {
    // Two neighbours of one room may lend each other a type, which is erased; rooms depend one way.
    const rooms = (circle: string) => new Set(circle.split(' > ').map((name) => roomOf(`${name}.ts`) || name.split('/')[0]));
    expect(circles(() => true).filter((circle) => rooms(circle).size > 1)).toEqual([]);
  });
});

function circles(counts: (imported: Import) => boolean): string[] {
  const found: string[] = [];
  const done = new Set<string>();
  const visit = (name: string, way: readonly string[]) => {
    if (way.includes(name)) found.push([...way.slice(way.indexOf(name)), name].join(' > '));
    if (done.has(name) || way.includes(name)) return;
    for (const imported of byName.get(name)?.imports ?? []) if (!imported.isPackage && counts(imported)) visit(imported.to, [...way, name]);
    done.add(name);
  };
  for (const name of byName.keys()) visit(name, []);
  return found;
}

const written = ['backend', 'frontend', 'shared', 'dev-idp', 'tests'].flatMap((folder) => filesBelow(folder, ['.ts', '.tsx', '.mjs', '.css']));

describe('files', () => {
  it('have at most 350 lines', () => {
    expect(written.map((path) => [path, readFileSync(join(ROOT, path), 'utf8').split('\n').length - 1] as const).filter(([, lines]) => lines > 350)).toEqual([]);
  });

  it('are called after what they do', () => {
    expect(written.filter((path) => /(^|\/)(utils?|misc|helpers?)(\.|\/)/.test(path))).toEqual([]);
  });

  // Spelt apart, so that this file does not find itself.
  it.each([
    ['an address of one machine', new RegExp(['/wor', 'k/'].join('') + '|' + ['/ro', 'ot/'].join(''))],
    ['a package registry', new RegExp(['registry\\.npm', 'js|reg', 'istry\\.yarn'].join(''))],
    ['a promise instead of the work', new RegExp(['\\bTO', 'DO\\b|\\bFIX', 'ME\\b'].join(''))],
    ['a switched-off check', new RegExp(['@ts-ig', 'nore|@ts-no', 'check|\\b(it|test|describe)\\.(sk', 'ip|on', 'ly)\\b'].join(''))],
  ])('hold no trace of %s', (_what, pattern) => {
    expect(written.filter((path) => pattern.test(readFileSync(join(ROOT, path), 'utf8')))).toEqual([]);
  });

  it('print nothing behind the back of the log, but for commands', () => {
    expect([...backend, ...frontend].filter(({ path, text }) => !path.startsWith('backend/src/cli/') && /\bconsole\.(log|info|debug)\(/.test(text)).map(({ path }) => path)).toEqual([]);
  });
});

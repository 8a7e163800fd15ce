import { randomBytes } from 'node:crypto';
import { appendFileSync, existsSync, mkdirSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Client } from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { backUp } from '#backend/ops/backup';
import { MANIFEST, type Manifest } from '#backend/ops/manifest';
import { restore } from '#backend/ops/restore';
import { storedPaths } from '#backend/ops/stored-files';
import { createTestDatabase, type TestDatabase } from '../support/database.js';
import { openSecondCluster, type SecondCluster } from '../support/second-cluster.js';
import { pictureOf } from './database-picture.js';

let place: string;
let database: TestDatabase;
let second: SecondCluster;
let made = 0;
const storage = () => join(place, 'storage');
const fresh = (name: string) => join(place, `${name}-${made++}`);

async function plant(url: string): Promise<void> {
  const client = new Client({ connectionString: url });
  await client.connect();
  for (const [code, name] of [['SKH', 'Skerry Harbour'], ['ELS', 'A programme that nobody here is in — žluťoučký']]) {
    const { rows } = await client.query('insert into programmes (code, name) values ($1, $2) returning id', [code, name]);
    await client.query("insert into parties (programme_id, name, short_name, parts, issuer) values ($1, 'Tarnbeck Radio', 'Tarnbeck', '{radio unit}', 'https://id.example')", [rows[0].id]);
  }
  await client.query("insert into people (issuer, subject, name, email) values ('https://id.example', 'ines', 'Ines Torvald', 'ines.torvald@tarnbeck.example')");
  await client.end();
}

function plantFiles(): void {
  for (const [path, bytes] of [['files/ab/one', randomBytes(3_000_000)], ['files/cd/empty', Buffer.alloc(0)], ['incoming/half', randomBytes(10)]] as const) {
    mkdirSync(join(storage(), path, '..'), { recursive: true });
    writeFileSync(join(storage(), path), bytes);
  }
}

beforeAll(async () => {
  place = mkdtempSync(join(tmpdir(), 'crosstie-backup-'));
  [database, second] = await Promise.all([createTestDatabase(), openSecondCluster()]);
  await plant(database.ownerUrl);
  plantFiles();
});
afterAll(async () => {
  await Promise.all([database.drop(), second.stop()]);
  rmSync(place, { recursive: true, force: true });
});

async function backUpNow(): Promise<string> {
  const target = fresh('backup');
  await backUp({ backupUrl: database.backupUrl, storageDir: storage(), target });
  return target;
}

describe('a backup', () => {
  it('restores into an empty cluster, equal in every row, rule, grant and byte', async () => {
    const source = await backUpNow();
    const target = fresh('restored');
    await restore({ source, ownerUrl: second.ownerUrl, storageDir: target });

    const [before, after] = [await pictureOf(database.ownerUrl), await pictureOf(second.ownerUrl)];
    expect(JSON.stringify(before['rows of public.programmes'])).toContain('žluťoučký');
    expect(Object.keys(before).length).toBeGreaterThan(20);
    expect(after).toEqual(before);

    expect(await storedPaths(target)).toEqual(['files/ab/one', 'files/cd/empty']);
    for (const path of await storedPaths(target)) expect(readFileSync(join(target, path)).equals(readFileSync(join(storage(), path)))).toBe(true);
  });

  it('leaves the restored policies in force', async () => {
    const client = new Client({ connectionString: second.appUrl });
    await client.connect();
    expect((await client.query('select * from programmes')).rows).toEqual([]);
    await client.end();
  });

  it('is not restored over anything', async () => {
    const source = await backUpNow();
    const target = fresh('restored');
    await expect(restore({ source, ownerUrl: database.ownerUrl, storageDir: target })).rejects.toThrow('has tables already');
    await expect(restore({ source, ownerUrl: second.ownerUrl, storageDir: storage() })).rejects.toThrow('holds 2 files');
    expect(existsSync(target)).toBe(false);
  });

  it('does not replace an earlier one', async () => {
    const target = await backUpNow();
    await expect(backUp({ backupUrl: database.backupUrl, storageDir: storage(), target })).rejects.toThrow('exists already');
  });

  it('that fails half way leaves no folder', async () => {
    const target = fresh('backup');
    await expect(backUp({ backupUrl: database.backupUrl.replace(/:[^:@]+@/, ':wrong@'), storageDir: storage(), target })).rejects.toThrow();
    expect([existsSync(target), existsSync(`${target}.incomplete`)]).toEqual([false, false]);
  });

  it('taken by a role that may not read everything fails, rather than leaving rows out', async () => {
    await expect(backUp({ backupUrl: database.appUrl, storageDir: storage(), target: fresh('backup') })).rejects.toThrow('pg_dump failed');
  });
});

describe('a damaged backup is refused before anything is written', () => {
  async function refused(damage: (folder: string, manifest: Manifest) => void): Promise<string> {
    const source = await backUpNow();
    damage(source, JSON.parse(readFileSync(join(source, MANIFEST), 'utf8')) as Manifest);
    const target = fresh('restored');
    const error = await restore({ source, ownerUrl: second.ownerUrl, storageDir: target }).catch((caught: Error) => caught);
    expect(error).toBeInstanceOf(Error);
    expect(existsSync(target)).toBe(false);
    return (error as Error).message;
  }
  const rewrite = (folder: string, manifest: Manifest) => writeFileSync(join(folder, MANIFEST), JSON.stringify(manifest));

  it('with a changed file', async () => {
    expect(await refused((folder) => writeFileSync(join(folder, 'files/files/cd/empty'), 'x'))).toContain('is not what the manifest says');
  });
  it('with a changed database', async () => {
    expect(await refused((folder) => appendFileSync(join(folder, 'database.dump'), 'x'))).toContain('is not what the manifest says');
  });
  it('with a missing file', async () => {
    expect(await refused((folder) => rmSync(join(folder, 'files/files/ab/one')))).toContain('is missing');
  });
  it('with no manifest', async () => {
    expect(await refused((folder) => rmSync(join(folder, MANIFEST)))).toContain('holds no manifest.json');
  });
  it.each(['../outside', '/etc/passwd', 'files/../../outside'])('with a path that leads out: %s', async (path) => {
    expect(await refused((folder, manifest) => rewrite(folder, { ...manifest, files: [{ ...manifest.files[0], path }] }))).toContain('leads out of the backup');
  });
});

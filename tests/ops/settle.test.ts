import { createServer } from 'node:net';
import { describe, expect, it } from 'vitest';

interface Settled { ports: Record<string, number>; local: Record<string, boolean>; publicUrl: string; env: Record<string, string> }
const launch = (name: string) => import(new URL(`../../backend/bin/launch/${name}.mjs`, import.meta.url).href);

async function settle(env: Record<string, string>): Promise<Settled> {
  return (await launch('settle')).settle(env) as Settled;
}

const elsewhere = {
  DATABASE_URL: 'postgres://a@db.example/c', DATABASE_WORKER_URL: 'postgres://w@db.example/c', STORAGE_DIR: '/srv/crosstie',
  OIDC_ISSUER: 'https://id.example', SMTP_URL: 'smtp://mail.example', PUBLIC_URL: 'https://crosstie.example',
};

describe('what a start settles on', () => {
  it('runs everything itself when nothing is said', async () => {
    const { local, ports, publicUrl, env } = await settle({});
    expect(local).toEqual({ database: true, provider: true, mail: true });
    expect(publicUrl).toBe(`http://127.0.0.1:${ports['web']}`);
    expect(env['SESSION_SECRET'].length).toBeGreaterThanOrEqual(32);
  });

  it('moves all ports with one variable', async () => {
    expect((await settle({ PORT: '5000' })).ports).toEqual({ web: 5000, provider: 5001, mailPage: 5002, mailSmtp: 5003 });
  });

  it('runs nothing itself in a real installation, and keeps its addresses', async () => {
    const { local, env } = await settle(elsewhere);
    expect(local).toEqual({ database: false, provider: false, mail: false });
    expect(env).toMatchObject(elsewhere);
  });

  it.each(['DATABASE_WORKER_URL', 'STORAGE_DIR', 'OIDC_ISSUER', 'SMTP_URL'])('refuses half an installation: %s is named when it is missing', async (name) => {
    await expect(settle({ ...elsewhere, [name]: '' })).rejects.toThrow(name);
  });

  it.each(['https://crosstie.example', 'http://192.0.2.7:4180'])('never offers the demo\'s provider at %s', async (PUBLIC_URL) => {
    await expect(settle({ PUBLIC_URL })).rejects.toThrow('OIDC_ISSUER');
  });

  it('hands each process the database addresses it needs and no other', async () => {
    const { withDatabase } = await launch('settle');
    const all = { ...elsewhere, DATABASE_OWNER_URL: 'postgres://o@db.example/c', DATABASE_BACKUP_URL: 'postgres://b@db.example/c' };
    const given = Object.keys(withDatabase(all, ['DATABASE_URL']) as object).filter((name) => name.startsWith('DATABASE'));
    expect(given).toEqual(['DATABASE_URL']);
  });
});

describe('a taken port', () => {
  it('gives one line that names it and the way out', async () => {
    const server = createServer();
    await new Promise<void>((resolve) => { server.listen(0, '127.0.0.1', resolve); });
    const { port } = server.address() as { port: number };
    const { refuseTakenPorts } = await launch('ports');
    const error = await (refuseTakenPorts({ 'Crosstie itself': [port, 'PORT'] }) as Promise<void>).catch((caught: Error) => caught);
    server.close();
    expect((error as Error).message).toBe(`Port ${port} (Crosstie itself) is taken by another program. Stop that program, or choose another port: PORT=${port + 100} npm start`);
  });
});

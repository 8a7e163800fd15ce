import { Client } from 'pg';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { moveLocalIssuer } from '#backend/ops/move-issuer';
import { createTestDatabase, type TestDatabase } from '../support/database.js';

let database: TestDatabase;
let owner: Client;
beforeAll(async () => {
  database = await createTestDatabase();
  owner = new Client({ connectionString: database.ownerUrl });
  await owner.connect();
});
afterAll(async () => {
  await owner.end();
  await database.drop();
});

it('people of the demo follow their provider to another port, and nobody else does', async () => {
  const issuers = ['http://127.0.0.1:4181', 'http://127.0.0.1:4999', 'https://id.example', 'http://127.0.0.1.elsewhere.example:80'];
  for (const [n, issuer] of issuers.entries()) await owner.query('insert into people (issuer, subject, name, email) values ($1, $2, $2, $2)', [issuer, `person-${n}`]);
  await moveLocalIssuer(database.ownerUrl, 'http://127.0.0.1:4999');
  const { rows } = await owner.query<{ issuer: string }>('select issuer from people order by subject');
  expect(rows.map(({ issuer }) => issuer)).toEqual(['http://127.0.0.1:4999', 'http://127.0.0.1:4999', 'https://id.example', 'http://127.0.0.1.elsewhere.example:80']);
});

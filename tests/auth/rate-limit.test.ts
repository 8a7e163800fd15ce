import { afterAll, beforeAll, expect, it } from 'vitest';
import { Visitor } from '../support/visitor.js';
import { openStage, type Stage } from './sign-in-stage.js';

let stage: Stage;
beforeAll(async () => { stage = await openStage({ SIGN_INS_PER_MINUTE: '3' }); });
afterAll(() => stage.stop());

it('sign-ins beyond the limit are told to wait, and nothing else is', async () => {
  const ask = (path: string) => new Visitor().ask(`${stage.url}${path}`);
  const statuses: number[] = [];
  for (let n = 0; n < 4; n++) statuses.push((await ask('/api/auth/sign-in')).status);
  expect(statuses).toEqual([302, 302, 302, 429]);
  expect((await ask('/api/auth/callback?code=a&state=b')).headers.get('content-type')).toContain('application/problem+json');
  expect((await ask('/api/auth/session')).status).toBe(401);
});

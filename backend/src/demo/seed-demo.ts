import { Client } from 'pg';
import { Storage } from '../files/storage.js';
import { craneStories } from './crane-stories.js';
import { otherStories } from './other-stories.js';
import { plantStory } from './plant-story.js';
import { Rows } from './rows.js';
import { plantTenants } from './tenants.js';

export interface SeedParts {
  readonly ownerUrl: string;
  readonly storageDir: string;
  readonly issuer: string;
  readonly onProgress?: (done: number, of: number) => void;
}

/**
 * Fills an empty database with the demo, once: answers false where there is a programme already.
 * The captures are made here by the project's own generator; their decodes wait in the queue.
 */
export async function seedDemo({ ownerUrl, storageDir, issuer, onProgress }: SeedParts): Promise<boolean> {
  const owner = new Client({ connectionString: ownerUrl });
  await owner.connect();
  try {
    const { rowCount } = await owner.query('select 1 from programmes limit 1');
    if (rowCount) return false;
    const storage = new Storage(storageDir);
    await storage.prepare();
    await owner.query('begin');
    const rows = new Rows(owner, new Date());
    const tenants = await plantTenants(rows, issuer);
    const stories = [...craneStories, ...otherStories];
    for (const [index, story] of stories.entries()) {
      await plantStory({ rows, storage, tenants }, story);
      onProgress?.(index + 1, stories.length);
    }
    await owner.query('commit');
    return true;
  } catch (error) {
    await owner.query('rollback').catch(() => undefined);
    throw error;
  } finally {
    await owner.end();
  }
}

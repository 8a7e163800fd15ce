import type { Services } from '../http/services.js';
import { Refusal } from '../http/problems.js';

/**
 * Four digits drawn at random among those that are free. A sequence would tell each vendor how
 * many issues it cannot see, and so would a refusal of a number in use: the draw happens in a
 * function that sees all numbers and answers one.
 */
export async function drawNumber(services: Services, programmeId: string): Promise<string> {
  const drawn = await services.database.row<{ number: string | null }>('select access.free_number($1) as number', [programmeId]);
  if (!drawn?.number) throw new Refusal(409, 'numbers-used-up', 'No number is free', 'All ten thousand numbers of this programme are in use. Open a further programme.');
  return drawn.number;
}

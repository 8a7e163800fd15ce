import type { Services } from '../http/services.js';
import type { Reading } from './reading.js';

/** Keeps what was read beside the file, in rows that share its policy. */
export async function storeReading(services: Services, { fileId, programmeId, reading }: { fileId: string; programmeId: string; reading: Reading }): Promise<void> {
  const { database } = services;
  if (reading.capture) {
    const { facts, spectrum, warnings } = reading.capture;
    await database.change('insert into captures (file_id, programme_id, facts, spectrum, warnings) values ($1, $2, $3, $4, $5)',
      [fileId, programmeId, JSON.stringify(facts), spectrum ? JSON.stringify(spectrum) : null, JSON.stringify(warnings)]);
  }
  if (!reading.snapshot) return;
  const { syntax, vocabularies, notUnderstood, problems, missing, parameters } = reading.snapshot;
  await database.change('insert into snapshots (file_id, programme_id, syntax, vocabularies, not_understood, problems, missing) values ($1, $2, $3, $4, $5, $6, $7)',
    [fileId, programmeId, syntax, JSON.stringify(vocabularies), JSON.stringify(notUnderstood), JSON.stringify(problems), JSON.stringify(missing)]);
  await database.change(`
    insert into snapshot_parameters (file_id, programme_id, parameter, value, path, raw, line)
    select $1, $2, p.parameter, p.value, p.path, p.raw, p.line
    from jsonb_to_recordset($3::jsonb) as p (parameter text, value jsonb, path text, raw text, line integer)`,
  [fileId, programmeId, JSON.stringify(parameters)]);
}

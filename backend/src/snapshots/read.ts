import { parameterFacts } from '#shared/parameters';
import { decodeText } from './syntax/decodeText.js';
import { parseDetected } from './syntax/detect.js';
import type { FoundValue, Glossary, NotUnderstood, ReadingProblem, SnapshotReading } from './types.js';
import { choose } from './vocabulary/choose.js';
import { gather, type Gathered } from './vocabulary/gather.js';
import { implied } from './vocabulary/implied.js';

const REPORTED = 1000;

/**
 * Reads a configuration snapshot: the common parameters with their place in the file, and what
 * was not understood. The syntax is decided by content. Throws SnapshotError where the file
 * cannot be read at all; never anything else.
 */
export function readSnapshot(bytes: Uint8Array, options: { glossary?: Glossary | null } = {}): SnapshotReading {
  const glossary = options.glossary ?? null;
  const { text, encoding } = decodeText(bytes);
  const { syntax, root, stray } = parseDetected(text);
  const gathered = gather(root, glossary);
  const chosen = choose(gathered.candidates);
  const values = [...chosen.values, ...implied(gathered, chosen.values)].map(publicValue);
  const notUnderstood = [...gathered.notUnderstood, ...stray.map((s): NotUnderstood => ({ path: '', line: s.line, raw: s.text.slice(0, 200) }))].sort((a, b) => a.line - b.line);
  const problems = [...gathered.problems, ...chosen.problems, ...unusedWords(glossary, gathered), ...nothingUnderstood(values, notUnderstood), ...cutShort(notUnderstood)];
  return { syntax, encoding, values, notUnderstood: notUnderstood.slice(0, REPORTED), problems: problems.slice(0, REPORTED) };
}

/** Drops what only the choice needed. */
function publicValue(value: FoundValue): FoundValue {
  const { parameter, path, raw, line, vocabulary, implied: isImplied, lowBitsOnly, note } = value;
  return { parameter, value: value.value, path, raw, line, vocabulary, implied: isImplied, ...(lowBitsOnly === undefined ? {} : { lowBitsOnly }), ...(note === undefined ? {} : { note }) };
}

function unusedWords(glossary: Glossary | null, { glossaryUsed }: Gathered): ReadingProblem[] {
  return [...(glossary ?? [])].filter(([path]) => !glossaryUsed.has(path)).map(([path, entry]) => ({
    code: 'glossary-unused',
    message: `The glossary's ${path} (${parameterFacts(entry.parameter)?.label ?? entry.parameter}) does not occur in the file.`,
    line: null,
    path,
  }));
}

function nothingUnderstood(values: readonly FoundValue[], missed: readonly NotUnderstood[]): ReadingProblem[] {
  if (values.length > 0) return [];
  return [{ code: 'nothing-understood', message: `None of the ${missed.length} settings is a common name, a field of TS 38.331 or 36.331, or a fronthaul management name. Send a glossary with the file.`, line: null, path: null }];
}

const cutShort = (missed: readonly NotUnderstood[]): ReadingProblem[] =>
  missed.length <= REPORTED ? [] : [{ code: 'cut-short', message: `${missed.length} settings were not understood; the first ${REPORTED} are listed.`, line: null, path: null }];

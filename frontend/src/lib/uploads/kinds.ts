import type { FileKind } from '#shared/vocabulary';
import type { UploadEndpoint } from './send-file.js';

/** A first guess by name, for choosing where to send a file; the server decides by content. */
const RULES: readonly (readonly [RegExp, FileKind])[] = [
  [/\.(sigmf|sigmf-meta|sigmf-data|wav|pcap|pcapng|iq|cf32|cf64|cs16|ci16|sc16|cs8|ci8|cu8|cfile|raw|dat|bin)$/i, 'capture'],
  [/glossary[^/]*\.(ya?ml|json)$/i, 'glossary'],
  [/\.(json|ya?ml|xml|conf|cfg|ini|txt|properties)$/i, 'snapshot'],
];
export const kindOf = (name: string): FileKind => RULES.find(([pattern]) => pattern.test(name))?.[1] ?? 'attachment';

export const ENDPOINT_OF: Record<FileKind, UploadEndpoint> = {
  capture: 'uploadCapture', snapshot: 'uploadSnapshot', glossary: 'uploadGlossary', attachment: 'uploadAttachment',
};
export const KIND_LABELS: Record<FileKind, string> = {
  capture: 'Capture', snapshot: 'Configuration snapshot', glossary: 'Glossary', attachment: 'Other file',
};

/** Raw I/Q says nothing about itself: format and rate have to be stated before it is sent. */
export const isRaw = (name: string): boolean => /\.(iq|cf32|cf64|cs16|ci16|sc16|cs8|ci8|cu8|cfile|raw|dat|bin)$/i.test(name);
/** WAV carries its rate and format, not its centre. */
export const isWav = (name: string): boolean => /\.wav$/i.test(name);

export const DATATYPES = ['cf32_le', 'ci16_le', 'ci16_be', 'ci8', 'cu8', 'cf32_be', 'ci32_le', 'cf64_le', 'cu16_le'] as const;
const BY_ENDING: Record<string, string> = { cf32: 'cf32_le', cfile: 'cf32_le', cf64: 'cf64_le', cs16: 'ci16_le', ci16: 'ci16_le', sc16: 'ci16_le', cs8: 'ci8', ci8: 'ci8', cu8: 'cu8' };
export const guessedDatatype = (name: string): string => BY_ENDING[name.split('.').at(-1)?.toLowerCase() ?? ''] ?? '';

export type PairPart = 'data' | 'meta';
/** A SigMF pair is two files of one name. */
export function pairPartOf(name: string): { stem: string; part: PairPart } | null {
  const match = /^(.*)\.sigmf-(data|meta)$/i.exec(name);
  return match ? { stem: match[1]!, part: match[2]!.toLowerCase() as PairPart } : null;
}

/** Which side a snapshot's name speaks of, where it does: `side-a.yaml`, `b.conf`, a party's or a unit's name. */
export function sideByName(name: string, words: { a: readonly string[]; b: readonly string[] }): 'a' | 'b' | null {
  const stem = name.toLowerCase().replace(/\.[^.]+$/, '');
  const letter = /(?:^|[-_. ])(?:side[-_. ]?)?([ab])$/.exec(stem)?.[1];
  if (letter === 'a' || letter === 'b') return letter;
  const speaks = (list: readonly string[]): boolean => list.some((word) => word.length > 1 && stem.includes(word.toLowerCase()));
  const a = speaks(words.a);
  return a === speaks(words.b) ? null : a ? 'a' : 'b';
}

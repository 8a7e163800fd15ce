/** What was asked of the decode command. */
export interface DecodeArguments {
  readonly capture?: string;
  readonly datatype?: string;
  readonly sampleRateHz?: number;
  readonly centreFrequencyHz?: number;
  readonly sideA?: string;
  readonly sideB?: string;
  readonly glossaryA?: string;
  readonly glossaryB?: string;
  readonly transmitter?: 'a' | 'b';
}

/** The command line cannot be followed; the message says which part and what to give. */
export class UsageError extends Error {
  readonly code = 'usage';
}

const OPTIONS: Readonly<Record<string, keyof DecodeArguments>> = {
  '--capture': 'capture',
  '--datatype': 'datatype',
  '--sample-rate': 'sampleRateHz',
  '--centre-frequency': 'centreFrequencyHz',
  '--side-a': 'sideA',
  '--side-b': 'sideB',
  '--glossary-a': 'glossaryA',
  '--glossary-b': 'glossaryB',
  '--transmitter': 'transmitter',
};

/** Reads `--name value` and `--name=value`; each option at most once. */
export function parseArguments(argv: readonly string[]): DecodeArguments {
  const found: Record<string, string | number> = {};
  for (let i = 0; i < argv.length; i += 1) {
    const [name, ...rest] = argv[i]!.split('=');
    const field = OPTIONS[name!];
    if (!field) throw new UsageError(`"${name!.slice(0, 60)}" is not an option. Use ${Object.keys(OPTIONS).join(', ')}.`);
    if (field in found) throw new UsageError(`${name} is given twice. Give it once.`);
    const text = rest.length > 0 ? rest.join('=') : argv[(i += 1)];
    if (text === undefined || text === '') throw new UsageError(`${name} needs a value.`);
    found[field] = valueOf(field, name!, text);
  }
  if (found['capture'] === undefined && found['sideA'] === undefined && found['sideB'] === undefined) {
    throw new UsageError('Nothing to decode: give at least one of --capture, --side-a and --side-b.');
  }
  return found;
}

function valueOf(field: keyof DecodeArguments, name: string, text: string): string | number {
  if (field === 'sampleRateHz' || field === 'centreFrequencyHz') return hertz(field, name, text);
  if (field === 'transmitter' && text !== 'a' && text !== 'b') throw new UsageError(`--transmitter is "${text.slice(0, 20)}"; it must be a or b.`);
  return text;
}

function hertz(field: string, name: string, text: string): number {
  const value = Number(text);
  const fits = Number.isFinite(value) && (field === 'sampleRateHz' ? value > 0 && value <= 1e11 : value >= 0 && value <= 1e12);
  if (!fits) throw new UsageError(`${name} is "${text.slice(0, 40)}"; it must be a number of hertz${field === 'sampleRateHz' ? ' above zero' : ''}, such as 30720000.`);
  return value;
}

import { messageOf } from '../../lib/refusal.js';

const sentence = (text: string): string => (/[.!?…]$/.test(text) ? text : `${text}.`);

/** What the server refused, in its own words, where the reader is looking. */
export function Refused({ error }: { error: unknown }) {
  if (!error) return null;
  return <p className="notice broken refused" role="alert">{sentence(messageOf(error))}</p>;
}

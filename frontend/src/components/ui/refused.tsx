import { messageOf } from '../../lib/refusal.js';

/** What the server refused, in its own words, where the reader is looking. */
export function Refused({ error }: { error: unknown }) {
  if (!error) return null;
  return <p className="notice broken" role="alert">{messageOf(error)}</p>;
}

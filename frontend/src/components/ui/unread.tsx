import { messageOf } from '../../lib/refusal.js';

/** A part of a page that could not be read: what it is, why, and the way to try again, in its own place. */
export function Unread({ what, error, again }: { what: string; error: unknown; again: () => unknown }) {
  return (
    <p className="notice broken mb-4" role="alert">
      <b>{what} could not be read.</b> {messageOf(error)} <button type="button" className="text-button" onClick={() => void again()}>Try again</button>
    </p>
  );
}

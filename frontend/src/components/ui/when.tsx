import { instant, moment, weekdayOf } from '../../lib/times.js';

const shows = { full: instant, moment, weekday: weekdayOf } as const;

/** An instant in the reader's zone, with the exact UTC one for machines. */
export function When({ at, as = 'moment' }: { at: string; as?: keyof typeof shows }) {
  return <time dateTime={at}>{shows[as](at)}</time>;
}

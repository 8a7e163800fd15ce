const LONGEST = 255;

/** A name to show: its last part, without control and direction characters. It never becomes a path. */
export function displayName(original: string): string {
  const last = original.split(/[/\\]/).at(-1) ?? '';
  // eslint-disable-next-line no-control-regex
  const clean = last.replace(/[\u0000-\u001f\u007f-\u009f\u200b-\u200f\u202a-\u202e\u2066-\u2069\ud800-\udfff]/gu, '').trim();
  // Cut between characters, not within one.
  return clean === '' || clean === '.' || clean === '..' ? 'unnamed' : [...clean].slice(0, LONGEST).join('');
}

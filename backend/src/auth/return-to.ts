const HOME = '/';
const LONGEST = 2000;

/**
 * The place in Crosstie to which a sign-in returns; anything that could lead elsewhere becomes the home
 * page. Browsers read `//host` and `/\host` as another site, and drop tabs and line breaks first.
 */
export function localPath(wanted: unknown): string {
  if (typeof wanted !== 'string' || wanted.length > LONGEST || !/^\/(?![/\\])/.test(wanted)) return HOME;
  // oxlint-disable-next-line no-control-regex
  if (/[\u0000-\u0020\u007f\\]/.test(wanted)) return HOME;
  const base = 'http://crosstie.invalid';
  const url = URL.canParse(wanted, base) ? new URL(wanted, base) : null;
  if (!url || url.origin !== base) return HOME;
  const isWayIn = /^\/(api|sign-in|invitations)(\/|$)/.test(url.pathname);
  return isWayIn ? HOME : `${url.pathname}${url.search}${url.hash}`;
}

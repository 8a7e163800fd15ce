/** The browser and system that a user agent names, for people; browsers that pass for others stand before them. */
const BROWSERS: readonly (readonly [RegExp, string])[] = [
  [/\bEdgA?\/(\d+)/, 'Edge'], [/\bOPR\/(\d+)/, 'Opera'], [/\bFirefox\/(\d+)/, 'Firefox'], [/\b(?:Headless)?Chrome\/(\d+)/, 'Chrome'], [/\bVersion\/(\d+).*Safari/, 'Safari'],
];
const SYSTEMS: readonly (readonly [RegExp, string])[] = [
  [/Windows/, 'Windows'], [/Android/, 'Android'], [/iPhone|iPad/, 'iOS'], [/Mac OS X/, 'macOS'], [/CrOS/, 'ChromeOS'], [/Linux/, 'Linux'],
];

export function browserName(agent: string): string {
  const browser = BROWSERS.map(([pattern, name]) => ({ name, version: pattern.exec(agent)?.[1] })).find(({ version }) => version);
  const system = SYSTEMS.find(([pattern]) => pattern.test(agent))?.[1];
  if (!browser) return agent || 'A browser that gives no name';
  return `${browser.name} ${browser.version}${system ? ` on ${system}` : ''}`;
}

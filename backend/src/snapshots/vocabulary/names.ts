/** A key without what styles differ in: `subcarrier_spacing`, `subcarrier-spacing` and `subcarrierSpacing` are one. */
export const compact = (key: string): string => key.toLowerCase().replace(/[^a-z0-9µμ]/g, '').replace(/[µμ]/g, 'u');

/** One step of a key path: the key, its place where it stands in a list. */
export interface Step { readonly key: string; readonly compact: string; readonly place: number | null }

export const step = (key: string, place: number | null = null): Step => {
  const bare = withoutModule(key);
  return { key: bare, compact: compact(bare), place };
};

/** A model's name before a JSON key of network management: `o-ran-uplane-conf:compression`. */
const withoutModule = (key: string): string => (/^[a-z][\w.-]*:[\w.-]+$/i.test(key) ? key.slice(key.indexOf(':') + 1) : key);

export const pathText = (steps: readonly Step[]): string =>
  steps.reduce((text, s) => {
    const name = s.key === '' ? '' : text === '' ? s.key : `.${s.key}`;
    return text + name + (s.place === null ? '' : `[${s.place}]`);
  }, '');

import { carrierStatements, ssbStatements } from '../compare/derive.js';
import type { View } from '../compare/view.js';
import { nrBand } from '../standards/nrBands.js';
import { nrArfcnToHz } from '../standards/nrRaster.js';

/** A frequency of the cell from whatever is stated: carrier, point A, block or band. Null where none is. */
export function someFrequencyHz(view: View): number | null {
  const band = view.number('band');
  return carrierStatements(view)[0]?.value ?? ssbStatements(view)[0]?.value ?? nrArfcnToHz(view.number('pointAArfcn') ?? -1)
    ?? (band === null || view.technology !== 'nr' ? null : nrBand(band)?.downlinkHz?.[0] ?? null);
}

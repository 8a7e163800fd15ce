import type { ParameterName } from '#shared/parameters';
import type { NotPermitted } from '../types.js';
import { carrierStatements } from '../compare/derive.js';
import type { View } from '../compare/view.js';
import { lteBand } from '../standards/lteBands.js';
import { nrBand, onChannelRaster, onSsbRaster } from '../standards/nrBands.js';
import { gscnToHz, nrArfcnToHz } from '../standards/nrRaster.js';

const CHANNEL_CLAUSE = 'TS 38.104, table 5.4.2.3-1';

/** Channel numbers on the global raster, and the carrier's on the raster of its band. */
export function channelNumber(view: View): NotPermitted[] {
  const outside = (['nrArfcn', 'pointAArfcn', 'ssbArfcn'] as const).flatMap((name) => {
    const n = view.number(name);
    return n === null || nrArfcnToHz(n) !== null ? [] : [{ parameter: view.named(name), clause: 'TS 38.104, table 5.4.2.1-1', note: `NR channel numbers go from 0 to 3279165, not to ${n}` }];
  });
  const arfcn = view.number('nrArfcn');
  const band = bandOf(view);
  if (outside.length > 0 || arfcn === null || band === null || view.technology !== 'nr' || onChannelRaster(band, arfcn)) return outside;
  return [{ parameter: view.named('nrArfcn'), clause: CHANNEL_CLAUSE, note: `${arfcn} is not on the channel raster of band n${band.band}`, yieldsToDifference: true, together: [view.named('band')] }];
}

const bandOf = (view: View): ReturnType<typeof nrBand> => {
  const band = view.number('band');
  return band === null ? null : nrBand(band);
};

/** A carrier within the band that is stated beside it (its uplink counts: captures are made of it too). */
export function carrierInBand(view: View): NotPermitted[] {
  const band = bandOf(view);
  const carrier = carrierStatements(view)[0] ?? null;
  if (band === null || carrier === null || view.technology !== 'nr' || carrier.name === 'nrArfcn') return [];
  const inside = [band.downlinkHz, band.uplinkHz].some((span) => span !== null && carrier.value >= span[0] && carrier.value <= span[1]);
  if (inside) return [];
  return [{ parameter: view.named('carrierFrequency'), clause: 'TS 38.104, table 5.2-1', note: `${carrier.value / 1e6} MHz lies outside band n${band.band}`, yieldsToDifference: true, together: [view.named('band')] }];
}

/** Synchronisation channel numbers: known at all, and among those of the band. */
export function synchronisationChannel(view: View): NotPermitted[] {
  const gscn = view.number('gscn');
  const parameter: ParameterName = 'gscn';
  if (gscn === null || view.technology !== 'nr') return [];
  const band = bandOf(view);
  if (gscnToHz(gscn) === null && !(gscn > 26_639 && band?.ssb.some((r) => onSsbRaster(r, gscn)) === true) && gscn < 26_640) {
    return [{ parameter, clause: 'TS 38.104, table 5.4.3.1-1', note: `there is no synchronisation channel ${gscn}` }];
  }
  if (band === null || band.ssb.length === 0) return [];
  const spacing = view.number('ssbSubcarrierSpacing');
  const rasters = band.ssb.filter((r) => spacing === null || r.spacingHz === spacing);
  // A block of a spacing that the band's table lacks has the band's other raster.
  if ((rasters.length === 0 ? band.ssb : rasters).some((r) => onSsbRaster(r, gscn))) return [];
  return [{ parameter, clause: 'TS 38.104, table 5.4.3.3-1', note: `${gscn} is no synchronisation channel of band n${band.band}`, yieldsToDifference: true, together: [view.named('band')] }];
}

/** A block within its band. Blocks off the synchronisation raster are allowed on secondary cells. */
export function blockInBand(view: View): NotPermitted[] {
  const band = bandOf(view);
  const hz = nrArfcnToHz(view.number('ssbArfcn') ?? -1);
  if (band?.downlinkHz == null || hz === null || (hz >= band.downlinkHz[0] && hz <= band.downlinkHz[1])) return [];
  return [{ parameter: 'ssbArfcn', clause: 'TS 38.104, table 5.4.3.3-1', note: `the block at ${hz / 1e6} MHz lies outside band n${band.band}`, yieldsToDifference: true, together: [view.named('band')] }];
}

/** LTE channel numbers of the stated band (TS 36.104 table 5.7.3-1). */
export function lteChannel(view: View): NotPermitted[] {
  const [earfcn, band] = [view.number('earfcn'), view.number('band')];
  const spans = view.technology === 'lte' && band !== null ? lteBand(band) : null;
  if (earfcn === null || spans === null) return [];
  const inside = [spans.downlink, spans.uplink].some((s) => s !== null && earfcn >= s[0] && earfcn <= s[1]);
  return inside ? [] : [{ parameter: view.named('earfcn'), clause: 'TS 36.104, table 5.7.3-1', note: `${earfcn} is no channel of band ${band}`, yieldsToDifference: true, together: [view.named('band')] }];
}

/** The band's duplex mode (TS 38.104 table 5.2-1). */
export function duplexOfBand(view: View): NotPermitted[] {
  const band = bandOf(view);
  const duplex = view.text('duplexMode');
  if (view.technology !== 'nr' || band === null || duplex === null || (band.duplex !== 'fdd' && band.duplex !== 'tdd') || band.duplex === duplex) return [];
  return [{ parameter: 'duplexMode', clause: 'TS 38.104, table 5.2-1', note: `band n${band.band} is ${band.duplex.toUpperCase()}, not ${duplex.toUpperCase()}` }];
}

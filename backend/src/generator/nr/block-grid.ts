import { pbchPoints, type NrMib } from './pbch.js';
import { nrPss, nrSss, pbchReference, type BlockIdentity } from './sync-signals.js';

export const BLOCK_SUBCARRIERS = 240;
export const BLOCK_SYMBOLS = 4;

/** Places of the PBCH in one symbol of the block (TS 38.211 Table 7.4.3.1-1). */
function pbchSubcarriers(symbol: number): number[] {
  const all = Array.from({ length: BLOCK_SUBCARRIERS }, (_, k) => k);
  return symbol === 2 ? all.filter((k) => k < 48 || k >= 192) : all;
}

/** The block as a grid of 4 symbols by 240 subcarriers, interleaved, unit amplitude; PSS by its boost. */
export function blockGrid(mib: NrMib, block: BlockIdentity, pssBoostDb = 0): Float64Array[] {
  const symbols = Array.from({ length: BLOCK_SYMBOLS }, () => new Float64Array(2 * BLOCK_SUBCARRIERS));
  const boost = 10 ** (pssBoostDb / 20);
  const pss = nrPss(block.cellId);
  const sss = nrSss(block.cellId);
  for (let n = 0; n < 127; n++) {
    symbols[0][2 * (56 + n)] = boost * pss[n];
    symbols[2][2 * (56 + n)] = sss[n];
  }
  const data = pbchPoints(mib, block);
  const reference = pbchReference(block);
  let nextData = 0;
  let nextReference = 0;
  for (const l of [1, 2, 3]) {
    for (const k of pbchSubcarriers(l)) {
      const isReference = k % 4 === block.cellId % 4;
      const from = isReference ? reference : data;
      const at = isReference ? nextReference++ : nextData++;
      symbols[l][2 * k] = from[2 * at];
      symbols[l][2 * k + 1] = from[2 * at + 1];
    }
  }
  return symbols;
}

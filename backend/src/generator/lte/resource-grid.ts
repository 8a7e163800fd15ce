import { randomPoint } from '../constellations.js';
import { Random } from '../random.js';
import { ltePbchPoints } from './pbch.js';
import { referencePoints, referenceSubcarriers, reservedSubcarriers, type ReferencePlace } from './reference.js';
import { ltePss, lteSss } from './sync-signals.js';
import { lteSlot } from './timing.js';
import type { LteSpec } from './spec.js';

interface Place {
  /** Counted from the transmitter's time zero. */
  readonly slot: number;
  readonly symbol: number;
}

/** Fills the grids of the ports (12·N_RB points, lowest subcarrier first, interleaved) for one symbol. */
export function fillLteSymbol(spec: LteSpec, ports: Float64Array[], { slot, symbol }: Place): void {
  const inFrame = ((slot % 20) + 20) % 20;
  const place: ReferencePlace = { cellId: spec.cellId, prefix: spec.prefix, slot: inFrame, symbol, resourceBlocks: spec.resourceBlocks };
  const reference = referencePoints(place);
  ports.forEach((grid, p) => referenceSubcarriers(p, place).forEach((k, m) => put(grid, k, reference, m)));
  const middle = addSynchronisation(spec, ports, place) || addBroadcast(spec, ports, { place, slot });
  addData(spec, ports, { place, slot, middle });
}

function put(grid: Float64Array, k: number, points: ArrayLike<number>, at: number): void {
  grid[2 * k] = points[2 * at];
  grid[2 * k + 1] = points[2 * at + 1];
}

/** Synchronisation signals on 62 subcarriers about DC; true where this symbol carries one (TS 36.211 clause 6.11). */
function addSynchronisation(spec: LteSpec, ports: Float64Array[], { slot, symbol }: ReferencePlace): boolean {
  const last = lteSlot(spec.prefix).symbols - 1;
  const fdd = spec.duplex === 'fdd';
  const isPrimary = fdd ? slot % 10 === 0 && symbol === last : slot % 10 === 2 && symbol === 2;
  const isSecondary = fdd ? slot % 10 === 0 && symbol === last - 1 : slot % 10 === 1 && symbol === last;
  if (!isPrimary && !isSecondary) return false;
  const sss = isSecondary ? lteSss(spec.cellId, slot >= 10) : null;
  const points = sss ? Float64Array.from({ length: 124 }, (_, i) => (i % 2 === 0 ? sss[i / 2] : 0)) : ltePss(spec.cellId);
  for (let n = 0; n < 62; n++) put(ports[0], 6 * spec.resourceBlocks - 31 + n, points, n);
  return true;
}

/** Broadcast channel in symbols 0 to 3 of slot 1, clear of the reference symbols of four ports (clause 6.6.4). */
function addBroadcast(spec: LteSpec, ports: Float64Array[], { place, slot }: { place: ReferencePlace; slot: number }): boolean {
  if (place.slot !== 1 || place.symbol > 3) return false;
  const frame = spec.systemFrameNumber + Math.floor(slot / 20);
  const mib = { resourceBlocks: spec.resourceBlocks, phichDuration: spec.phichDuration, phichResource: spec.phichResource, systemFrameNumber: ((frame % 1024) + 1024) % 1024 };
  const points = ltePbchPoints(mib, spec);
  const free = (symbol: number) => {
    const reserved = reservedSubcarriers(4, { ...place, symbol });
    return Array.from({ length: 72 }, (_, i) => 6 * spec.resourceBlocks - 36 + i).filter((k) => !reserved.has(k));
  };
  let at = 0;
  for (let l = 0; l < place.symbol; l++) at += free(l).length;
  const here = free(place.symbol);
  send(ports, here, points.subarray(2 * at, 2 * (at + here.length)));
  return true;
}

/** One port: as it is. Two: space-frequency block code of clause 6.3.4.3, pair by pair. */
function send(ports: Float64Array[], subcarriers: readonly number[], points: Float64Array): void {
  if (ports.length === 1) {
    subcarriers.forEach((k, i) => put(ports[0], k, points, i));
    return;
  }
  const r = Math.SQRT1_2;
  for (let i = 0; i + 1 < subcarriers.length; i += 2) {
    const [a, b] = [subcarriers[i], subcarriers[i + 1]];
    const [x0r, x0i, x1r, x1i] = points.subarray(2 * i, 2 * i + 4);
    put(ports[0], a, [r * x0r, r * x0i], 0);
    put(ports[0], b, [r * x1r, r * x1i], 0);
    put(ports[1], a, [-r * x1r, r * x1i], 0);
    put(ports[1], b, [r * x0r, -r * x0i], 0);
  }
}

/** Control and data around what is already there; `middle` keeps the 72 central subcarriers free. */
function addData(spec: LteSpec, ports: Float64Array[], { place, slot, middle }: { place: ReferencePlace; slot: number; middle: boolean }): void {
  const subframe = Math.floor(slot / 2);
  const plan = new Random(spec.seed, 'subframe', subframe);
  const used = plan.chance(spec.load.subframes);
  const modulation = plan.pick(spec.load.modulations);
  const width = Math.max(1, Math.round(spec.resourceBlocks * spec.load.blocks));
  const first = plan.integer(0, spec.resourceBlocks - width);
  const isControl = place.slot % 2 === 0 && place.symbol < spec.controlSymbols;
  if (!isControl && !used) return;
  const reserved = reservedSubcarriers(ports.length, place);
  const random = new Random(spec.seed, 'symbol', slot, place.symbol);
  const centre = 6 * spec.resourceBlocks;
  const free: number[] = [];
  for (let block = 0; block < spec.resourceBlocks; block++) {
    if (isControl ? !random.chance(0.7) : block < first || block >= first + width) continue;
    for (let k = 12 * block; k < 12 * block + 12; k++) {
      if (!reserved.has(k) && !(middle && k >= centre - 36 && k < centre + 36)) free.push(k);
    }
  }
  const points = new Float64Array(2 * free.length);
  for (let i = 0; i < free.length; i++) randomPoint(points, i, { modulation: isControl ? 'qpsk' : modulation, random });
  send(ports, free, points);
}

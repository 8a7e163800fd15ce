import { uplinkName, parameterFacts, type ParameterName } from '#shared/parameters';
import type { FoundValue, SnapshotReading } from '../types.js';

export type Direction = 'downlink' | 'uplink';

/** Names that only one technology has: they tell it where no file says it. */
const NR_ONLY: readonly ParameterName[] = ['nrArfcn', 'pointAArfcn', 'offsetToCarrier', 'ssbArfcn', 'gscn', 'kSsb', 'ssbSubcarrierSpacing', 'offsetToPointA'];
const LTE_ONLY: readonly ParameterName[] = ['earfcn', 'tddSubframeAssignment', 'uplinkEarfcn'];

/** One side's snapshot, looked at in one direction: directional names mean that direction's. */
export class View {
  private readonly byName: ReadonlyMap<string, FoundValue>;
  readonly technology: string | null;

  constructor(reading: SnapshotReading | null, readonly direction: Direction) {
    this.byName = new Map((reading?.values ?? []).map((v): [string, FoundValue] => [v.parameter, v]));
    this.technology = this.technologyStated();
  }

  /** The file's name for a parameter in this direction. */
  named(name: ParameterName): ParameterName {
    return this.direction === 'uplink' && parameterFacts(name)?.directional === true ? uplinkName(name) : name;
  }

  get(name: ParameterName): FoundValue | null {
    return this.byName.get(this.named(name)) ?? null;
  }

  number(name: ParameterName): number | null {
    const value = this.get(name)?.value;
    return typeof value === 'number' ? value : null;
  }

  text(name: ParameterName): string | null {
    const value = this.get(name)?.value;
    return typeof value === 'string' ? value : null;
  }

  has(name: ParameterName): boolean {
    return this.get(name) !== null;
  }

  private technologyStated(): string | null {
    const stated = this.byName.get('technology')?.value;
    if (typeof stated === 'string') return stated;
    if (NR_ONLY.some((n) => this.byName.has(n))) return 'nr';
    return LTE_ONLY.some((n) => this.byName.has(n)) ? 'lte' : null;
  }
}

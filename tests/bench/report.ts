/** Ratios of one thing measured, a value a round. */
export interface Measured {
  readonly name: string;
  readonly ratios: readonly number[];
  readonly goal?: number;
  readonly lowerIsBetter?: boolean;
}
export type Report = (name: string, ratios: readonly number[], about?: Pick<Measured, 'goal' | 'lowerIsBetter'>) => void;

export function median(values: readonly number[]): number {
  const sorted = values.toSorted((a, b) => a - b);
  const middle = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[middle] : (sorted[middle - 1] + sorted[middle]) / 2;
}

export function lineOf({ name, ratios, goal }: Measured): string {
  const [least, most] = [Math.min(...ratios), Math.max(...ratios)];
  return `${median(ratios).toFixed(2)}  (${least.toFixed(2)} to ${most.toFixed(2)} in ${ratios.length} rounds)  ${name}${goal === undefined ? '' : `, goal at least ${goal}`}`;
}

/** The prefix in which an axis is read best: values are multiplied by `factor` and carry `unit`. */
export interface AxisUnit { unit: string; factor: number }

const STEPS: Record<string, readonly AxisUnit[]> = {
  Hz: [{ unit: 'MHz', factor: 1e-6 }, { unit: 'kHz', factor: 1e-3 }, { unit: 'Hz', factor: 1 }],
  s: [{ unit: 's', factor: 1 }, { unit: 'ms', factor: 1e3 }, { unit: 'µs', factor: 1e6 }, { unit: 'ns', factor: 1e9 }],
};

/** `largest` is the greatest magnitude on the axis. A unit without steps stays as it is. */
export const axisUnit = (unit: string, largest: number): AxisUnit =>
  STEPS[unit]?.find((step) => largest * step.factor >= 1) ?? { unit, factor: 1 };

export const axisTitle = (label: string, unit: string): string => (unit ? `${label}, ${unit}` : label);

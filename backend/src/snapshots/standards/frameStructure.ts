/**
 * The fronthaul's frame-structure octet (ETSI TS 103 859, clause 7.5): transform size in the high
 * nibble, spacing in the low one. Codes that later versions reserved are not listed.
 */
const TRANSFORMS: Readonly<Record<number, number>> = { 7: 128, 8: 256, 9: 512, 10: 1024, 11: 2048, 12: 4096, 13: 1536, 14: 3072 };
const SPACINGS_HZ: Readonly<Record<number, number>> = { 0: 15e3, 1: 30e3, 2: 60e3, 3: 120e3, 4: 240e3, 12: 1250, 14: 5000 };

/** Transform size, or null for "no transform" and reserved codes. */
export const transformOfFrameStructure = (octet: number): number | null => TRANSFORMS[(octet >> 4) & 15] ?? null;

/** Subcarrier spacing in Hz, or null for a reserved code. */
export const spacingOfFrameStructure = (octet: number): number | null => SPACINGS_HZ[octet & 15] ?? null;

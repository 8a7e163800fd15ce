/** Name and version of the engine: stands in every result, so that a re-run is comparable. */
export const ENGINE = { name: 'crosstie-engine', version: '0.1.0' } as const;

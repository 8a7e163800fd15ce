/** TS 36.104 V19.2.0, table 5.7.3-1: band, lowest downlink MHz, first and last downlink number, lowest uplink MHz, first uplink number. */
type Row = [band: number, downlinkMhz: number, first: number, last: number, uplinkMhz: number | null, uplinkFirst: number | null];

const ROWS: readonly Row[] = [
  [1, 2110, 0, 599, 1920, 18000], [2, 1930, 600, 1199, 1850, 18600], [3, 1805, 1200, 1949, 1710, 19200], [4, 2110, 1950, 2399, 1710, 19950],
  [5, 869, 2400, 2649, 824, 20400], [6, 875, 2650, 2749, 830, 20650], [7, 2620, 2750, 3449, 2500, 20750], [8, 925, 3450, 3799, 880, 21450],
  [9, 1844.9, 3800, 4149, 1749.9, 21800], [10, 2110, 4150, 4749, 1710, 22150], [11, 1475.9, 4750, 4949, 1427.9, 22750], [12, 729, 5010, 5179, 699, 23010],
  [13, 746, 5180, 5279, 777, 23180], [14, 758, 5280, 5379, 788, 23280], [17, 734, 5730, 5849, 704, 23730], [18, 860, 5850, 5999, 815, 23850],
  [19, 875, 6000, 6149, 830, 24000], [20, 791, 6150, 6449, 832, 24150], [21, 1495.9, 6450, 6599, 1447.9, 24450], [22, 3510, 6600, 7399, 3410, 24600],
  [23, 2180, 7500, 7699, 2000, 25500], [24, 1525, 7700, 8039, 1626.5, 25700], [25, 1930, 8040, 8689, 1850, 26040], [26, 859, 8690, 9039, 814, 26690],
  [27, 852, 9040, 9209, 807, 27040], [28, 758, 9210, 9659, 703, 27210], [29, 717, 9660, 9769, null, null], [30, 2350, 9770, 9869, 2305, 27660],
  [31, 462.5, 9870, 9919, 452.5, 27760], [32, 1452, 9920, 10359, null, null], [33, 1900, 36000, 36199, 1900, 36000], [34, 2010, 36200, 36349, 2010, 36200],
  [35, 1850, 36350, 36949, 1850, 36350], [36, 1930, 36950, 37549, 1930, 36950], [37, 1910, 37550, 37749, 1910, 37550], [38, 2570, 37750, 38249, 2570, 37750],
  [39, 1880, 38250, 38649, 1880, 38250], [40, 2300, 38650, 39649, 2300, 38650], [41, 2496, 39650, 41589, 2496, 39650], [42, 3400, 41590, 43589, 3400, 41590],
  [43, 3600, 43590, 45589, 3600, 43590], [44, 703, 45590, 46589, 703, 45590], [45, 1447, 46590, 46789, 1447, 46590], [46, 5150, 46790, 54539, 5150, 46790],
  [48, 3550, 55240, 56739, 3550, 55240], [49, 3550, 56740, 58239, 3550, 56740], [50, 1432, 58240, 59089, 1432, 58240], [51, 1427, 59090, 59139, 1427, 59090],
  [52, 3300, 59140, 60139, 3300, 59140], [53, 2483.5, 60140, 60254, 2483.5, 60140], [65, 2110, 65536, 66435, 1920, 131072], [66, 2110, 66436, 67335, 1710, 131972],
  [67, 738, 67336, 67535, null, null], [68, 753, 67536, 67835, 698, 132672], [69, 2570, 67836, 68335, null, null], [70, 1995, 68336, 68585, 1695, 132972],
  [71, 617, 68586, 68935, 663, 133122], [72, 461, 68936, 68985, 451, 133472], [73, 460, 68986, 69035, 450, 133522], [74, 1475, 69036, 69465, 1427, 133572],
  [75, 1432, 69466, 70315, null, null], [76, 1427, 70316, 70365, null, null], [85, 728, 70366, 70545, 698, 134002], [87, 420, 70546, 70595, 410, 134182], [88, 422, 70596, 70645, 412, 134232],
];

export interface LteBand { readonly band: number; readonly downlink: readonly [number, number]; readonly uplink: readonly [number, number] | null }

/** Channel numbers of a band; null for one that the table here does not have. */
export function lteBand(band: number): LteBand | null {
  const row = ROWS.find((r) => r[0] === band);
  if (row === undefined) return null;
  const [, , first, last, , uplinkFirst] = row;
  return { band, downlink: [first, last], uplink: uplinkFirst === null ? null : [uplinkFirst, uplinkLast(row)] };
}

/** Band 70 and others have narrower uplinks: the next band's first number ends them. */
function uplinkLast([band, , first, last, , uplinkFirst]: Row): number {
  const narrower: Readonly<Record<number, number>> = { 66: 132_671, 70: 133_121 };
  return narrower[band] ?? (uplinkFirst ?? 0) + last - first;
}

/** Frequency of an EARFCN, Hz (TS 36.104 clause 5.7.3), downlink and uplink numbers alike; null outside the table. */
export function earfcnToHz(earfcn: number): number | null {
  if (!Number.isInteger(earfcn)) return null;
  for (const row of ROWS) {
    const [, downlinkMhz, first, last, uplinkMhz, uplinkFirst] = row;
    if (earfcn >= first && earfcn <= last) return Math.round(downlinkMhz * 1e6) + 100e3 * (earfcn - first);
    if (uplinkMhz !== null && uplinkFirst !== null && earfcn >= uplinkFirst && earfcn <= uplinkLast(row)) {
      return Math.round(uplinkMhz * 1e6) + 100e3 * (earfcn - uplinkFirst);
    }
  }
  return null;
}

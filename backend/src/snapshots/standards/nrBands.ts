import { hzToNrArfcnFraction } from './nrRaster.js';

export type Duplex = 'fdd' | 'tdd' | 'sdl' | 'sul';
export interface SsbRaster { readonly spacingHz: number; readonly first: number; readonly last: number; readonly step: number; readonly listed: readonly number[] | null }
export interface NrBand {
  readonly band: number;
  readonly duplex: Duplex;
  readonly uplinkHz: readonly [number, number] | null;
  readonly downlinkHz: readonly [number, number] | null;
  /** Finest steps of the channel raster in NR-ARFCN; a number on any of them is on the raster. */
  readonly steps: readonly number[];
  readonly ssb: readonly SsbRaster[];
}

type Row = [band: number, duplex: Duplex, uplinkMhz: string, downlinkMhz: string, ssb: string, steps?: readonly number[]];

/**
 * TS 38.104 V19.4.0, tables 5.2-1, 5.2-2, 5.4.2.3-1, -2 and 5.4.3.3-1, -2 (as carried by the
 * open nrarfcn package; the bands of V17.8.0 agree in a second code base). SSB: spacing in kHz,
 * then GSCN range / step or a list. Steps other than 20 (100 kHz)
 * stand last; the coarser raster of the same band lies within the finer one.
 */
const ROWS: readonly Row[] = [
  [1, 'fdd', '1920-1980', '2110-2170', '15:5279-5419'], [2, 'fdd', '1850-1910', '1930-1990', '15:4829-4969'],
  [3, 'fdd', '1710-1785', '1805-1880', '15:4517-4693'], [5, 'fdd', '824-849', '869-894', '15:2177-2230 30:2183-2224'],
  [7, 'fdd', '2500-2570', '2620-2690', '15:6554-6718'], [8, 'fdd', '880-915', '925-960', '15:2318-2395'],
  [12, 'fdd', '699-716', '729-746', '15:1828-1858'], [13, 'fdd', '777-787', '746-756', '15:1871-1885'],
  [14, 'fdd', '788-798', '758-768', '15:1901-1915'], [18, 'fdd', '815-830', '860-875', '15:2156-2182'],
  [20, 'fdd', '832-862', '791-821', '15:1982-2047'], [24, 'fdd', '1626.5-1660.5', '1525-1559', '15:3818-3892 30:3824-3886'],
  [25, 'fdd', '1850-1915', '1930-1995', '15:4829-4981'], [26, 'fdd', '814-849', '859-894', '15:2153-2230'],
  [28, 'fdd', '703-748', '758-803', '15:1901-2002'], [29, 'sdl', '', '717-728', '15:1798-1813'],
  [30, 'fdd', '2305-2315', '2350-2360', '15:5879-5893'], [31, 'fdd', '452.5-457.5', '462.5-467.5', '15:1161-1162'],
  [34, 'tdd', '2010-2025', '2010-2025', '15:5032,5043,5054 30:5036-5050'],
  [38, 'tdd', '2570-2620', '2570-2620', '15:6432,6443,6457,6468,6479,6493,6507,6518,6532,6543 30:6437-6538'],
  [39, 'tdd', '1880-1920', '1880-1920', '15:4707,4715,4718,4729,4732,4743,4747,4754,4761,4768,4772,4782,4786,4793 30:4712-4789'],
  [40, 'tdd', '2300-2400', '2300-2400', '30:5762-5989'], [41, 'tdd', '2496-2690', '2496-2690', '15:6246-6717/3 30:6252-6714/3', [3]],
  [46, 'tdd', '5150-5925', '5150-5925', '30:8993-9530', [1]], [48, 'tdd', '3550-3700', '3550-3700', '30:7884-7982', [1]],
  [50, 'tdd', '1432-1517', '1432-1517', '30:3590-3781'], [51, 'tdd', '1427-1432', '1427-1432', '15:3572-3574'],
  [53, 'tdd', '2483.5-2495', '2483.5-2495', '15:6215-6232 30:6221-6226'], [54, 'tdd', '1670-1675', '1670-1675', '15:4181-4182'],
  [65, 'fdd', '1920-2010', '2110-2200', '15:5279-5494'], [66, 'fdd', '1710-1780', '2110-2200', '15:5279-5494 30:5285-5488'],
  [67, 'sdl', '', '738-758', '15:1850-1888'], [68, 'fdd', '698-728', '753-783', '15:1888-1951'],
  [70, 'fdd', '1695-1710', '1995-2020', '15:4993-5044'], [71, 'fdd', '663-698', '617-652', '15:1547-1624'],
  [72, 'fdd', '451-456', '461-466', '15:1157-1159'], [74, 'fdd', '1427-1470', '1475-1518', '15:3692-3790'],
  [75, 'sdl', '', '1432-1517', '15:3584-3787'], [76, 'sdl', '', '1427-1432', '15:3572-3574'],
  [77, 'tdd', '3300-4200', '3300-4200', '30:7711-8329', [1]], [78, 'tdd', '3300-3800', '3300-3800', '30:7711-8051', [1]],
  [79, 'tdd', '4400-5000', '4400-5000', '30:8480-8880/16 30:8475-8884', [1]],
  [80, 'sul', '1710-1785', '', ''], [81, 'sul', '880-915', '', ''], [82, 'sul', '832-862', '', ''], [83, 'sul', '703-748', '', ''],
  [84, 'sul', '1920-1980', '', ''], [85, 'fdd', '698-716', '728-746', '15:1826-1858'], [86, 'sul', '1710-1780', '', ''],
  [87, 'fdd', '410-415', '420-425', '15:1055-1057'], [88, 'fdd', '412-417', '422-427', '15:1061-1062'], [89, 'sul', '824-849', '', ''],
  [90, 'tdd', '2496-2690', '2496-2690', '15:6245-6718 30:6252-6714', [3, 20]],
  [91, 'fdd', '832-862', '1427-1432', '15:3572-3574'], [92, 'fdd', '832-862', '1432-1517', '15:3584-3787'],
  [93, 'fdd', '880-915', '1427-1432', '15:3572-3574'], [94, 'fdd', '880-915', '1432-1517', '15:3584-3787'],
  [95, 'sul', '2010-2025', '', ''], [96, 'tdd', '5925-7125', '5925-7125', '30:9531-10363', [1]],
  [97, 'sul', '2300-2400', '', ''], [98, 'sul', '1880-1920', '', ''], [99, 'sul', '1626.5-1660.5', '', ''],
  [100, 'fdd', '874.4-880', '919.4-925', '15:2303-2307,41638'], [101, 'tdd', '1900-1910', '1900-1910', '15:4754-4768 30:4760-4764'],
  [102, 'tdd', '5925-6425', '5925-6425', '30:9531-9877', [1]], [104, 'tdd', '6425-7125', '6425-7125', '30:9882-10358/7', [1]],
  [105, 'fdd', '663-703', '612-652', '15:1535-1624'], [109, 'fdd', '703-733', '1432-1517', '15:3584-3787'],
  [257, 'tdd', '26500-29500', '26500-29500', '120:22388-22558 240:22390-22556/2', [1]],
  [258, 'tdd', '24250-27500', '24250-27500', '120:22257-22443 240:22258-22442/2', [1]],
  [259, 'tdd', '39500-43500', '39500-43500', '120:23140-23369 240:23142-23368/2', [1]],
  [260, 'tdd', '37000-40000', '37000-40000', '120:22995-23166 240:22996-23164/2', [1]],
  [261, 'tdd', '27500-28350', '27500-28350', '120:22446-22492 240:22446-22490/2', [1]],
  [262, 'tdd', '47200-48200', '47200-48200', '120:23586-23641 240:23588-23640/2', [1]],
];

const range = (mhz: string): [number, number] | null => {
  if (mhz === '') return null;
  const [low, high] = mhz.split('-').map((f) => Number(`${f}e6`));
  return [low, high];
};

function ssbRasters(text: string): SsbRaster[] {
  return text === '' ? [] : text.split(' ').flatMap((part) => {
    const [spacing, ranges] = part.split(':');
    const spacingHz = Number(spacing) * 1e3;
    const listed = ranges.split(',').filter((r) => !r.includes('-')).map(Number);
    const spans = ranges.split(',').filter((r) => r.includes('-')).map((r): SsbRaster => {
      const [first, last, step] = r.split(/[-/]/).map(Number);
      return { spacingHz, first, last, step: step ?? 1, listed: null };
    });
    return listed.length === 0 ? spans : [...spans, { spacingHz, first: Math.min(...listed), last: Math.max(...listed), step: 1, listed }];
  });
}

const BANDS: ReadonlyMap<number, NrBand> = new Map(ROWS.map(([band, duplex, uplink, downlink, ssb, steps]): [number, NrBand] => [
  band, { band, duplex, uplinkHz: range(uplink), downlinkHz: range(downlink), steps: steps ?? [20], ssb: ssbRasters(ssb) },
]));

/** The band's rows, or null for a band that the tables here do not have. */
export const nrBand = (band: number): NrBand | null => BANDS.get(band) ?? null;

/** First and last NR-ARFCN of a frequency span. */
export function arfcnSpan([lowHz, highHz]: readonly [number, number]): [number, number] {
  const first = Math.ceil(Math.max(hzToNrArfcnFraction(lowHz) ?? 0, 0) - 1e-6);
  // The span of n258 opens just below the third range of the global raster.
  return [lowHz === 24_250e6 ? 2_016_667 : first, Math.floor((hzToNrArfcnFraction(highHz) ?? 0) + 1e-6)];
}

/** Whether a carrier's NR-ARFCN lies on the band's channel raster, in the downlink or the uplink. */
export function onChannelRaster(band: NrBand, arfcn: number): boolean {
  // One extra point of n28 (a 40 MHz position).
  if (band.band === 28 && (arfcn === 155_608 || arfcn === 144_608)) return true;
  return [band.downlinkHz, band.uplinkHz].some((span) => {
    if (span === null) return false;
    const [first, last] = arfcnSpan(span);
    return arfcn >= first && arfcn <= last && band.steps.some((s) => (arfcn - first) % s === 0);
  });
}

export const onSsbRaster = (raster: SsbRaster, gscn: number): boolean =>
  raster.listed !== null ? raster.listed.includes(gscn) : gscn >= raster.first && gscn <= raster.last && (gscn - raster.first) % raster.step === 0;

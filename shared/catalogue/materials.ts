import type { Material } from '../model/site.ts';
import {
  gigapascalToPascal,
  ksiToPascal,
  megapascalToPascal,
  pascalToMegapascal,
  type Metre,
  type Pascal,
} from '../model/units.ts';
import { absent, found, nearNames, plainName, type Found } from './lookup.ts';

/** Yield (or 0.2 % proof) strength up to and including a thickness, mm. */
type Band = readonly [upTo: number, yieldMegapascal: number];

interface Grade {
  readonly names: readonly string[];
  readonly source: string;
  readonly family: Family;
  readonly bands: readonly Band[];
}

interface Family {
  readonly youngsModulus: Pascal;
  readonly poisson: number;
  readonly expansion: number;
}

/** EN 1993-1-1:2005 §3.2.6. */
const STEEL: Family = { youngsModulus: gigapascalToPascal(210), poisson: 0.3, expansion: 12e-6 };
/** AISC 360: E 29 000 ksi, 6.5e-6/°F. Values from memory. */
const STEEL_US: Family = { youngsModulus: ksiToPascal(29_000), poisson: 0.3, expansion: 11.7e-6 };
/** EN 1993-1-4 §2.1.3, EN 10088-1. Values from memory. */
const AUSTENITIC: Family = {
  youngsModulus: gigapascalToPascal(200),
  poisson: 0.3,
  expansion: 16e-6,
};
const DUPLEX: Family = { ...AUSTENITIC, expansion: 13e-6 };
/** EN 1999-1-1 §3.2.5. Values from memory. */
const ALUMINIUM: Family = { youngsModulus: gigapascalToPascal(70), poisson: 0.3, expansion: 23e-6 };

const bands = (limits: readonly number[], yields: readonly number[]): Band[] =>
  yields.map((value, i) => [limits[i] ?? NaN, value]);

/** Limits of EN 10025-2 Table 7: an upper limit belongs to the band below it. */
const EN_10025 = [16, 40, 63, 80, 100, 150, 200, 250];
const EN_10025_2 =
  'EN 10025-2:2004 Table 7, minimum ReH by nominal thickness (above 100 mm from memory)';
const EN_1993_1_1 = 'EN 1993-1-1:2005 Table 3.1, simplified (S460 from memory)';
const EN_1993_1_4 = 'EN 1993-1-4 Table 2.1 (value from memory)';
const EN_1999_1_1 = 'EN 1999-1-1 Table 3.2 (value from memory)';
const ASTM = (standard: string) => `${standard}, minimum yield (value from memory)`;

const ksi = (n: number) => pascalToMegapascal(ksiToPascal(n));

const GRADES: readonly Grade[] = [
  {
    names: ['S235', 'S235 EN 10025-2'],
    source: EN_10025_2,
    family: STEEL,
    bands: bands(EN_10025, [235, 225, 215, 215, 215, 195, 185, 175]),
  },
  {
    names: ['S275', 'S275 EN 10025-2'],
    source: EN_10025_2,
    family: STEEL,
    bands: bands(EN_10025, [275, 265, 255, 245, 235, 225, 215, 205]),
  },
  {
    names: ['S355', 'S355 EN 10025-2'],
    source: EN_10025_2,
    family: STEEL,
    bands: bands(EN_10025, [355, 345, 335, 325, 315, 295, 285, 275]),
  },
  {
    names: ['S460N', 'S460N EN 10025-3'],
    source: 'EN 10025-3, minimum ReH by nominal thickness (above 100 mm from memory)',
    family: STEEL,
    bands: bands(EN_10025, [460, 440, 430, 410, 400, 380, 370]),
  },
  {
    names: ['S460M', 'S460M EN 10025-4'],
    source: 'EN 10025-4, minimum ReH by nominal thickness',
    family: STEEL,
    bands: bands(EN_10025, [460, 440, 430, 410, 400]),
  },
  ...(
    [
      ['S235', 235, 215],
      ['S275', 275, 255],
      ['S355', 355, 335],
      ['S450', 450, 410],
      ['S275N', 275, 255],
      ['S355N', 355, 335],
      ['S420N', 420, 390],
      ['S460N', 460, 430],
      ['S460M', 460, 430],
      ['S460Q', 460, 440],
    ] as const
  ).map(([name, thin, thick]): Grade => ({
    names: [`${name} EN 1993-1-1`],
    source: EN_1993_1_1,
    family: STEEL,
    bands: [
      [40, thin],
      [80, thick],
    ],
  })),
  ...(
    [
      ['1.4301', [230, 210, 210, 190], AUSTENITIC],
      ['1.4401', [240, 220, 220, 200], AUSTENITIC],
      ['1.4462', [500, 460, 460, 450], DUPLEX],
    ] as const
  ).flatMap(([name, [cold, hot, plate, bar], family]) =>
    (
      [
        ['cold strip', 8, cold],
        ['hot strip', 13.5, hot],
        ['plate', 75, plate],
        ['bar', 250, bar],
      ] as const
    ).map(([product, upTo, value]): Grade => ({
      names: [`${name} ${product}`],
      source: EN_1993_1_4,
      family,
      bands: [[upTo, value]],
    })),
  ),
  {
    names: ['6082-T6 sheet', '6082-T6 plate'],
    source: EN_1999_1_1,
    family: ALUMINIUM,
    bands: bands([6, 12.5, 100], [260, 255, 240]),
  },
  {
    names: ['6082-T6 extruded'],
    source: EN_1999_1_1,
    family: ALUMINIUM,
    bands: bands([5, 15], [250, 260]),
  },
  {
    names: ['6082-T6 bar'],
    source: EN_1999_1_1,
    family: ALUMINIUM,
    bands: bands([20, 150], [250, 260]),
  },
  {
    names: ['6061-T6 sheet', '6061-T6 plate'],
    source: EN_1999_1_1,
    family: ALUMINIUM,
    bands: [[80, 240]],
  },
  { names: ['6061-T6 extruded'], source: EN_1999_1_1, family: ALUMINIUM, bands: [[20, 240]] },
  {
    names: ['ASTM 6061-T6 sheet', 'ASTM 6061-T6 extruded'],
    source: `${ASTM('ASTM B209, B221')}; E as EN 1999-1-1`,
    family: ALUMINIUM,
    bands: [[25, ksi(35)]],
  },
  { names: ['ASTM A36'], source: ASTM('ASTM A36'), family: STEEL_US, bands: [[200, ksi(36)]] },
  { names: ['ASTM A992'], source: ASTM('ASTM A992'), family: STEEL_US, bands: [[150, ksi(50)]] },
  {
    names: ['ASTM A572-50'],
    source: ASTM('ASTM A572 Grade 50'),
    family: STEEL_US,
    bands: [[100, ksi(50)]],
  },
];

export const gradeNames = (): string[] => GRADES.flatMap(({ names }) => [...names]);

/** A grade at a thickness (m): its yield strength is that of the band the thickness lies in. */
export const material = (grade: string, thickness: Metre): Found<Material> => {
  const isMeant = (name: string) => plainName(name) === plainName(grade);
  const entry = GRADES.find(({ names }) => names.some(isMeant));
  if (!entry) return absent(`a grade of the catalogue: ${nearNames(grade, gradeNames())}`);
  // Thicknesses are typed in mm; a metre figure of them may be off by a rounding.
  const millimetres = Number((thickness * 1e3).toPrecision(9));
  const band = entry.bands.find(([upTo]) => millimetres <= upTo);
  const most = entry.bands.at(-1)?.[0] ?? NaN;
  if (!(millimetres > 0) || !band) {
    return absent(`a thickness above 0 and up to ${most} mm for ${grade} (${entry.source})`);
  }
  return found({
    designation: entry.names.find(isMeant) ?? grade,
    source: entry.source,
    ...entry.family,
    yieldStrength: megapascalToPascal(band[1]),
  });
};

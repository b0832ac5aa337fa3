import type { Section } from '../model/site.ts';
import { absent, found, plainName, type Found } from './lookup.ts';
import {
  circularHollow,
  flat,
  parallelFlange,
  rectangularHollow,
  type ParallelFlange,
} from './shapes.ts';

type Rows = Readonly<Record<string, ParallelFlange>>;

/** h, b, tw, tf, r in mm. EN 10365:2017 (IPE, HE, UB, UC nominal dimensions). */
const EN_10365: Rows = {
  'IPE 80': [80, 46, 3.8, 5.2, 5],
  'IPE 100': [100, 55, 4.1, 5.7, 7],
  'IPE 120': [120, 64, 4.4, 6.3, 7],
  'IPE 140': [140, 73, 4.7, 6.9, 7],
  'IPE 160': [160, 82, 5, 7.4, 9],
  'IPE 180': [180, 91, 5.3, 8, 9],
  'IPE 200': [200, 100, 5.6, 8.5, 12],
  'IPE 220': [220, 110, 5.9, 9.2, 12],
  'IPE 240': [240, 120, 6.2, 9.8, 15],
  'IPE 270': [270, 135, 6.6, 10.2, 15],
  'IPE 300': [300, 150, 7.1, 10.7, 15],
  'IPE 330': [330, 160, 7.5, 11.5, 18],
  'IPE 360': [360, 170, 8, 12.7, 18],
  'IPE 400': [400, 180, 8.6, 13.5, 21],
  'IPE 450': [450, 190, 9.4, 14.6, 21],
  'IPE 500': [500, 200, 10.2, 16, 21],
  'IPE 550': [550, 210, 11.1, 17.2, 24],
  'IPE 600': [600, 220, 12, 19, 24],
  'HE 100 A': [96, 100, 5, 8, 12],
  'HE 120 A': [114, 120, 5, 8, 12],
  'HE 140 A': [133, 140, 5.5, 8.5, 12],
  'HE 160 A': [152, 160, 6, 9, 15],
  'HE 180 A': [171, 180, 6, 9.5, 15],
  'HE 200 A': [190, 200, 6.5, 10, 18],
  'HE 220 A': [210, 220, 7, 11, 18],
  'HE 240 A': [230, 240, 7.5, 12, 21],
  'HE 260 A': [250, 260, 7.5, 12.5, 24],
  'HE 280 A': [270, 280, 8, 13, 24],
  'HE 300 A': [290, 300, 8.5, 14, 27],
  'HE 100 B': [100, 100, 6, 10, 12],
  'HE 120 B': [120, 120, 6.5, 11, 12],
  'HE 140 B': [140, 140, 7, 12, 12],
  'HE 160 B': [160, 160, 8, 13, 15],
  'HE 180 B': [180, 180, 8.5, 14, 15],
  'HE 200 B': [200, 200, 9, 15, 18],
  'HE 220 B': [220, 220, 9.5, 16, 18],
  'HE 240 B': [240, 240, 10, 17, 21],
  'HE 260 B': [260, 260, 10, 17.5, 24],
  'HE 280 B': [280, 280, 10.5, 18, 24],
  'HE 300 B': [300, 300, 11, 19, 27],
  'UB 254x146x31': [251.4, 146.1, 6, 8.6, 7.6],
  'UB 305x165x40': [303.4, 165, 6, 10.2, 8.9],
  'UB 457x191x67': [453.4, 189.9, 8.5, 12.7, 10.2],
  'UC 152x152x30': [157.6, 152.9, 6.5, 9.4, 7.6],
  'UC 203x203x46': [203.2, 203.6, 7.2, 11, 10.2],
  'UC 254x254x73': [254.1, 254.6, 8.6, 14.2, 12.7],
};

/**
 * d, bf, tw, tf and the fillet k(des) − tf, in. AISC Steel Construction Manual,
 * Table 1-1 (values from memory).
 */
const AISC: Rows = {
  W8x31: [8, 8, 0.285, 0.435, 0.394],
  W12x26: [12.2, 6.49, 0.23, 0.38, 0.3],
  W14x90: [14, 14.5, 0.44, 0.71, 0.6],
  W16x31: [15.9, 5.53, 0.275, 0.44, 0.402],
};

const MILLIMETRES_PER_INCH = 25.4;

const inMillimetres = ([h, b, tw, tf, r]: ParallelFlange): ParallelFlange => [
  h * MILLIMETRES_PER_INCH,
  b * MILLIMETRES_PER_INCH,
  tw * MILLIMETRES_PER_INCH,
  tf * MILLIMETRES_PER_INCH,
  r * MILLIMETRES_PER_INCH,
];

const rolled = (rows: Rows, source: string, as = (row: ParallelFlange) => row): Section[] =>
  Object.entries(rows).map(([name, row]) => parallelFlange(name, source, as(row)));

const ROLLED: ReadonlyMap<string, Section> = new Map(
  [
    ...rolled(EN_10365, 'EN 10365, computed from nominal dimensions'),
    ...rolled(AISC, 'AISC Manual Table 1-1, computed from dimensions', inMillimetres),
  ].map((section) => [plainName(section.designation), section]),
);

const NUMBER = '(\\d+(?:\\.\\d+)?)';
const HOLLOW = new RegExp(`^(SHS|RHS)${NUMBER}X${NUMBER}X${NUMBER}(HOT|COLD)$`);
const CIRCULAR = new RegExp(`^CHS${NUMBER}X${NUMBER}$`);
const FLAT = new RegExp(`^FLAT${NUMBER}X${NUMBER}$`);

export const sectionNames = (): string[] => [...ROLLED.values()].map((s) => s.designation);

const FORMS =
  'RHS h×b×t hot or cold, SHS b×b×t hot or cold, CHS d×t, FLAT h×t (mm), or one of the rolled sections';

/**
 * A section by its designation: a rolled one by name (HE 300 B, W12x26), a hollow
 * or flat one by its dimensions in mm (RHS 200x100x8 hot, CHS 168.3x6.3, FLAT 100x10).
 */
export const section = (designation: string): Found<Section> => {
  const name = plainName(designation);
  const rolledSection = ROLLED.get(name);
  if (rolledSection) return found(rolledSection);
  const figures = (match: RegExpExecArray, from: number, count: number) =>
    match.slice(from, from + count).map(Number);
  const hollow = HOLLOW.exec(name);
  if (hollow) {
    const [h = 0, b = 0, t = 0] = figures(hollow, 2, 3);
    const formed = hollow[5] === 'HOT' ? 'hot' : 'cold';
    // The inner corners begin where the walls end.
    if (t > 0 && 6 * t < Math.min(h, b)) {
      return found(rectangularHollow(designation, formed, h, b, t));
    }
  }
  const circular = CIRCULAR.exec(name);
  if (circular) {
    const [d = 0, t = 0] = figures(circular, 1, 2);
    if (t > 0 && 2 * t < d) return found(circularHollow(designation, d, t));
  }
  const bar = FLAT.exec(name);
  if (bar) {
    const [h = 0, t = 0] = figures(bar, 1, 2);
    if (h > 0 && t > 0) return found(flat(designation, h, t));
  }
  return absent(`${FORMS}: ${sectionNames().join(', ')}`);
};

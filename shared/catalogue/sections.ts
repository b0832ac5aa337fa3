import type { Section } from '../model/site.ts';
import { absent, found, nearNames, plainName, type Found } from './lookup.ts';
import { AISC, EN_10365 } from './rolled.ts';
import {
  circularHollow,
  flat,
  parallelFlange,
  rectangularHollow,
  type ParallelFlange,
} from './shapes.ts';

const MILLIMETRES_PER_INCH = 25.4;

const inMillimetres = ([h, b, tw, tf, r]: ParallelFlange): ParallelFlange => [
  h * MILLIMETRES_PER_INCH,
  b * MILLIMETRES_PER_INCH,
  tw * MILLIMETRES_PER_INCH,
  tf * MILLIMETRES_PER_INCH,
  r * MILLIMETRES_PER_INCH,
];

const rolled = (
  rows: Readonly<Record<string, ParallelFlange>>,
  source: string,
  as = (row: ParallelFlange) => row,
): Section[] => Object.entries(rows).map(([name, row]) => parallelFlange(name, source, as(row)));

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
    const isAsNamed = hollow[1] === 'RHS' || h === b;
    // The corners of the roundest leave some flat between them.
    if (isAsNamed && t > 0 && 6 * t < Math.min(h, b)) {
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
  return absent(`${FORMS}: ${nearNames(designation, sectionNames())}`);
};

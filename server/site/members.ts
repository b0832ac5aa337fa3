import { material as gradeAt } from '../../shared/catalogue/materials.ts';
import { section as sectionNamed } from '../../shared/catalogue/sections.ts';
import type { Material, Member, Point, Section, Station } from '../../shared/model/site.ts';
import {
  cubicMetre,
  gigapascalToPascal,
  megapascalToPascal,
  metre,
  metreToMillimetre,
  microstrainToStrain,
  millimetreToMetre,
  quarticMetre,
  squareMetre,
  type Metre,
} from '../../shared/model/units.ts';
import { readChannel, type SiteContext } from './channels.ts';
import type { Reading } from './reading.ts';
import { readVirtual } from './virtual.ts';

interface SectionOfFile {
  readonly name: string;
  readonly source: string;
  readonly height_mm: number;
  readonly width_mm: number;
  readonly thickness_mm: number;
  readonly area_cm2: number;
  readonly inertia_y_cm4: number;
  readonly inertia_z_cm4: number;
  readonly modulus_y_cm3: number;
  readonly modulus_z_cm3: number;
}

interface MaterialOfFile {
  readonly name: string;
  readonly source: string;
  readonly youngs_modulus_GPa: number;
  readonly poisson: number;
  readonly expansion_microstrain_per_K: number;
  readonly yield_MPa: number;
}

/** Stations typed to the mm may lie on a member's very end, whose length is a square root. */
const LENGTH_TOLERANCE = 1e-6;

const readSection = (reading: Reading, at: string): Section | null => {
  const file = reading.value<string | SectionOfFile>(at);
  if (file === undefined) return null;
  if (typeof file === 'string') {
    const known = sectionNamed(file);
    if (known.ok) return known.value;
    reading.faultAt(at, known.expected);
    return null;
  }
  return {
    designation: file.name,
    source: file.source,
    height: millimetreToMetre(file.height_mm),
    width: millimetreToMetre(file.width_mm),
    area: squareMetre(file.area_cm2 * 1e-4),
    inertiaY: quarticMetre(file.inertia_y_cm4 * 1e-8),
    inertiaZ: quarticMetre(file.inertia_z_cm4 * 1e-8),
    modulusY: cubicMetre(file.modulus_y_cm3 * 1e-6),
    modulusZ: cubicMetre(file.modulus_z_cm3 * 1e-6),
    thickness: millimetreToMetre(file.thickness_mm),
  };
};

const readMaterial = (reading: Reading, at: string, section: Section | null): Material | null => {
  const file = reading.value<string | MaterialOfFile>(`${at}/material`);
  if (file === undefined) return null;
  if (typeof file === 'string') {
    const typed = reading.value<number>(`${at}/thickness_mm`);
    if (typed === undefined && reading.has(`${at}/thickness_mm`)) return null;
    const thickness = typed === undefined ? section?.thickness : millimetreToMetre(typed);
    if (thickness === undefined) return null;
    const known = gradeAt(file, thickness);
    if (known.ok) return known.value;
    const came = `${file}, ${Number(metreToMillimetre(thickness).toPrecision(9))} mm thick`;
    reading.fault(`${at}/material`, known.expected, came);
    return null;
  }
  return {
    designation: file.name,
    source: file.source,
    youngsModulus: gigapascalToPascal(file.youngs_modulus_GPa),
    poisson: file.poisson,
    expansion: microstrainToStrain(file.expansion_microstrain_per_K),
    yieldStrength: megapascalToPascal(file.yield_MPa),
  };
};

const readPoint = (reading: Reading, at: string): Point | undefined => {
  const [x, y, z] = reading.value<readonly number[]>(at) ?? [];
  return x === undefined || y === undefined || z === undefined
    ? undefined
    : [metre(x), metre(y), metre(z)];
};

const lengthBetween = (from: Point, to: Point): Metre =>
  metre(Math.hypot(to[0] - from[0], to[1] - from[1], to[2] - from[2]));

const readStation = (
  reading: Reading,
  at: string,
  length: Metre | null,
  channelAt: (pointer: string) => Station['channels'],
  virtualAt: (pointer: string) => () => Station['channels'],
  site: SiteContext,
): (() => Station[]) => {
  site.stations.add(`${at}/id`, true);
  const id = reading.value<string>(`${at}/id`);
  const place = reading.value<number>(`${at}/at_m`);
  if (place !== undefined && length && place > length + LENGTH_TOLERANCE) {
    const metres = Number(length.toPrecision(6));
    reading.faultAt(`${at}/at_m`, `at most ${metres} m, the length of the member`);
  }
  if (!reading.isList(`${at}/channels`)) site.channels.incomplete();
  const measured = reading.items(`${at}/channels`).flatMap(channelAt);
  const virtual = reading.items(`${at}/virtual`).map(virtualAt);
  return () => {
    const channels = [...measured, ...virtual.flatMap((finish) => finish())];
    return id === undefined || place === undefined ? [] : [{ id, at: metre(place), channels }];
  };
};

/**
 * A member of the structure at `structure`, to be finished when every channel is known; none where
 * something is at fault.
 */
export const readMember = (
  reading: Reading,
  at: string,
  structure: string,
  site: SiteContext,
): (() => Member[]) => {
  site.members.add(`${at}/id`, { structure });
  const section = readSection(reading, `${at}/section`);
  const material = readMaterial(reading, at, section);
  const [from, to] = [readPoint(reading, `${at}/from_m`), readPoint(reading, `${at}/to_m`)];
  const length = from && to ? lengthBetween(from, to) : null;
  if (length === 0) reading.fault(`${at}/to_m`, 'another point than from_m', 'the same');
  if (!reading.isList(`${at}/stations`)) site.channels.incomplete();
  const channelAt = (pointer: string) => readChannel(reading, pointer, structure, material, site);
  const virtualAt = (pointer: string) => readVirtual(reading, pointer, structure, material, site);
  const finishing = reading
    .items(`${at}/stations`)
    .map((pointer) => readStation(reading, pointer, length, channelAt, virtualAt, site));
  return () => {
    const stations = finishing.flatMap((finish) => finish());
    const id = reading.value<string>(`${at}/id`);
    const name = reading.value<string>(`${at}/name`);
    if (id === undefined || name === undefined || !section || !material || !from || !to) return [];
    return [{ id, name, section, material, from, to, stations }];
  };
};

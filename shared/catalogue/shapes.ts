import type { Section } from '../model/site.ts';
import { cubicMetre, millimetreToMetre, quarticMetre, squareMetre } from '../model/units.ts';

/** Geometry in mm, the unit of the product standards; sections come out in m. */
interface Properties {
  readonly height: number;
  readonly width: number;
  readonly area: number;
  readonly inertiaY: number;
  readonly inertiaZ: number;
  readonly thickness: number;
}

const section = (designation: string, source: string, p: Properties): Section => ({
  designation,
  source,
  height: millimetreToMetre(p.height),
  width: millimetreToMetre(p.width),
  area: squareMetre(p.area * 1e-6),
  inertiaY: quarticMetre(p.inertiaY * 1e-12),
  inertiaZ: quarticMetre(p.inertiaZ * 1e-12),
  modulusY: cubicMetre((p.inertiaY / (p.height / 2)) * 1e-9),
  modulusZ: cubicMetre((p.inertiaZ / (p.width / 2)) * 1e-9),
  thickness: millimetreToMetre(p.thickness),
});

/** Depth, width, web, flange and root radius, mm. */
export type ParallelFlange = readonly [h: number, b: number, tw: number, tf: number, r: number];

/**
 * I and H sections of parallel flanges from their nominal dimensions. Each root
 * fillet is a spandrel: area (1−π/4)r², centroid r(10−3π)/(3(4−π)) from both
 * faces, own inertia r⁴(1/3 − π/16 − 1/(9(4−π))). Plane geometry; EN 10365 states
 * its tables for the same shape.
 */
export const parallelFlange = (
  designation: string,
  source: string,
  [h, b, tw, tf, r]: ParallelFlange,
): Section => {
  const clear = h - 2 * tf;
  const fillet = (1 - Math.PI / 4) * r ** 2;
  const off = (r * (10 - 3 * Math.PI)) / (3 * (4 - Math.PI));
  const own = r ** 4 * (1 / 3 - Math.PI / 16 - 1 / (9 * (4 - Math.PI)));
  return section(designation, source, {
    ...{ height: h, width: b, thickness: Math.max(tf, tw) },
    area: 2 * b * tf + clear * tw + 4 * fillet,
    inertiaY:
      (b * h ** 3 - (b - tw) * clear ** 3) / 12 + 4 * (own + fillet * (h / 2 - tf - off) ** 2),
    inertiaZ: (2 * tf * b ** 3 + clear * tw ** 3) / 12 + 4 * (own + fillet * (tw / 2 + off) ** 2),
  });
};

/** A rectangle with quarter-round corners: area, and inertia about the axis that halves `h`. */
const rounded = (h: number, b: number, r: number): { area: number; inertia: number } => {
  const corner = (1 - Math.PI / 4) * r ** 2;
  const off = (r * (10 - 3 * Math.PI)) / (3 * (4 - Math.PI));
  const own = r ** 4 * (1 / 3 - Math.PI / 16 - 1 / (9 * (4 - Math.PI)));
  return {
    area: h * b - 4 * corner,
    inertia: (b * h ** 3) / 12 - 4 * (own + corner * (h / 2 - off) ** 2),
  };
};

/** Corner radii in wall thicknesses: EN 10210-2 and EN 10219-2, Annex B (values from memory). */
const radii = (formed: 'hot' | 'cold', t: number): readonly [outer: number, inner: number] => {
  if (formed === 'hot') return [1.5, 1];
  if (t <= 6) return [2, 1];
  return t <= 10 ? [2.5, 1.5] : [3, 2];
};

/** Square and rectangular hollow sections, mm. */
export const rectangularHollow = (
  designation: string,
  formed: 'hot' | 'cold',
  h: number,
  b: number,
  t: number,
): Section => {
  const [outer, inner] = radii(formed, t);
  const about = (high: number, wide: number) => {
    const outside = rounded(high, wide, outer * t);
    const inside = rounded(high - 2 * t, wide - 2 * t, inner * t);
    return { area: outside.area - inside.area, inertia: outside.inertia - inside.inertia };
  };
  const [y, z] = [about(h, b), about(b, h)];
  return section(designation, formed === 'hot' ? 'EN 10210-2 Annex B' : 'EN 10219-2 Annex B', {
    ...{ height: h, width: b, thickness: t },
    ...{ area: y.area, inertiaY: y.inertia, inertiaZ: z.inertia },
  });
};

/** Circular hollow sections, mm. */
export const circularHollow = (designation: string, d: number, t: number): Section => {
  const inside = d - 2 * t;
  const inertia = (Math.PI / 64) * (d ** 4 - inside ** 4);
  return section(designation, 'EN 10210-2 / EN 10219-2, ring', {
    ...{ height: d, width: d, thickness: t, inertiaY: inertia, inertiaZ: inertia },
    area: (Math.PI / 4) * (d ** 2 - inside ** 2),
  });
};

/** Flat bars and plates, `h` upright, mm. */
export const flat = (designation: string, h: number, t: number): Section =>
  section(designation, 'rectangle', {
    ...{ height: h, width: t, thickness: Math.min(h, t), area: h * t },
    ...{ inertiaY: (t * h ** 3) / 12, inertiaZ: (h * t ** 3) / 12 },
  });

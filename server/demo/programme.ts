import { kilonewtonToNewton, newton, type Newton } from '../../shared/model/units.ts';

interface Step {
  /** Load in the hook at the end of the ramp, kN. */
  readonly load: number;
  /** s */
  readonly ramp: number;
  /** s */
  readonly hold: number;
}

/** Static proof: 1.25 times the safe working load of 100 kN, in five steps. */
const STEPS: readonly Step[] = [
  { load: 25, ramp: 8, hold: 20 },
  { load: 50, ramp: 8, hold: 20 },
  { load: 75, ramp: 8, hold: 20 },
  { load: 100, ramp: 8, hold: 20 },
  { load: 125, ramp: 8, hold: 40 },
  { load: 75, ramp: 10, hold: 12 },
  { load: 25, ramp: 10, hold: 12 },
  { load: 0, ramp: 6, hold: 30 },
];

/** Length of the programme, s; then it begins again. */
export const PROGRAMME_SECONDS = STEPS.reduce((sum, { ramp, hold }) => sum + ramp + hold, 0);

/** Share of the load that the jack lets go in a long hold, and how soon, s. */
const [SEEPAGE, SEEPAGE_TIME] = [0.002, 15];

/** From 0 to 1 without a jerk at either end. */
const eased = (share: number): number => share * share * (3 - 2 * share);

const heldLoad = (load: number, held: number): number =>
  load * (1 - SEEPAGE * (1 - Math.exp(-held / SEEPAGE_TIME)));

/** Load in the hook `since` seconds after the programme first began; 0 before. */
export const programmeLoad = (since: number): Newton => {
  if (since < 0) return newton(0);
  let left = since % PROGRAMME_SECONDS;
  let before = 0;
  for (const { load, ramp, hold } of STEPS) {
    if (left < ramp) return kilonewtonToNewton(before + (load - before) * eased(left / ramp));
    left -= ramp;
    if (left < hold) return kilonewtonToNewton(heldLoad(load, left));
    left -= hold;
    before = heldLoad(load, hold);
  }
  return newton(0);
};

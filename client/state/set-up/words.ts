/** What the keys and choices of the site file are called on screen. */
import { nameOf } from './difference.ts';
import { textAt, valueAt, type Json, type Path } from './tree.ts';

const LABELS: Readonly<Record<string, string>> = {
  id: 'Short name',
  name: 'Name',
  simulated: 'Simulated',
  highest_limit_share_of_yield: 'Highest limit allowed',
  default_limits: 'Limits of strain channels without their own',
  nodes: 'Nodes',
  structures: 'Structures',
  stale_after_s: 'Stale without a frame for',
  inputs: 'Inputs',
  unit: 'Unit',
  range: 'Range, low and high',
  safe_working_load_kN: 'Safe working load',
  load_channel: 'Channel that measures the load',
  members: 'Members',
  elevations: 'Elevations',
  right: 'Axis that runs to the right',
  section: 'Section',
  material: 'Material',
  thickness_mm: 'Thickness under the gauges',
  from_m: 'Start of the axis: x, y, z',
  to_m: 'End of the axis: x, y, z',
  stations: 'Stations',
  at_m: 'Distance from the member’s start',
  channels: 'Channels',
  virtual: 'Virtual channels',
  measurand: 'Measures',
  node: 'Node',
  input: 'Input',
  calibration: 'Calibration records',
  zeros: 'Zeros',
  limits: 'Limits',
  definition: 'Comes from',
  valid_from: 'In force from',
  author: 'By',
  reason: 'Why',
  recorded_at: 'Added',
  corrects: 'Corrects record',
  signal: 'What the node sends',
  response: 'What it means',
  kind: 'Kind',
  circuit: 'Bridge circuit',
  gauge_factor: 'Gauge factor',
  gauge_resistance_ohm: 'Gauge resistance',
  poisson: 'Poisson’s ratio',
  leads: 'Lead wires',
  resistance_ohm: 'Resistance of one conductor',
  trimmed: 'Adjacent arm holds as much',
  zero_mV_per_V: 'Zero',
  transverse_sensitivity_percent: 'Transverse sensitivity Kt',
  temperature: 'Correction for temperature',
  zero_Cel: 'Temperature in the zero state',
  reference_Cel: 'Temperature the gauge factor is stated at',
  factor_percent_per_100_K: 'Gauge factor’s temperature coefficient',
  thermal_output: 'Thermal output',
  coefficients_microstrain: 'Coefficients a0 to a4',
  quoted_gauge_factor: 'Quoted for a gauge factor of',
  grid: 'Measuring grid',
  on: 'Bonded to',
  excitation: 'Excitation',
  stated_V: 'Stated',
  measured_by_input: 'Measured by input',
  mV_per_V_per_count: 'Scale',
  microvolt_per_count: 'Scale',
  zero_count: 'Count at zero',
  rated_signal: 'Signal at the rated value',
  signal_unit: 'Unit of the signal',
  rated_value: 'Rated value',
  value_unit: 'Unit of the value',
  zero_signal: 'Signal at the value 0',
  level: 'Level',
  basis: 'Stated as',
  value: 'Limit',
  deadband: 'Deadband',
  on_delay_s: 'On-delay',
  raw: 'Mean of the raw figures',
  noise: 'Noise (standard deviation)',
  samples: 'Samples',
  temperature_Cel: 'Temperature',
  state: 'Structure',
  load_kN: 'Load that was on',
  of: 'Of channels',
  text: 'Expression',
  names: 'Names in it',
  quantity: 'Quantity',
  gauges: 'Gauges',
  layout: 'Layout',
  channel: 'Channel',
  y_mm: 'y, to the side',
  z_mm: 'z, upward',
  source: 'Source of its figures',
  height_mm: 'Height along z',
  width_mm: 'Width along y',
  area_cm2: 'Area',
  inertia_y_cm4: 'Second moment of area about y–y',
  inertia_z_cm4: 'Second moment of area about z–z',
  modulus_y_cm3: 'Elastic section modulus about y–y',
  modulus_z_cm3: 'Elastic section modulus about z–z',
  youngs_modulus_GPa: 'Young’s modulus',
  expansion_microstrain_per_K: 'Thermal expansion',
  yield_MPa: 'Yield strength at the member’s thickness',
  length_mm: 'Length along the strain',
};

const UNITS_IN_KEYS = /_(mV_per_V|microstrain|percent|ohm|MPa|GPa|kN|mm|Cel|V|m|s)(_.*)?$/;

const spaced = (key: string): string => {
  const words = key.replace(UNITS_IN_KEYS, '').replaceAll('_', ' ');
  return words.charAt(0).toUpperCase() + words.slice(1);
};

export const labelOf = (key: string): string => LABELS[key] ?? spaced(key);

const CHOICES: Readonly<Record<string, Readonly<Record<string, string>>>> = {
  unit: {
    '/': 'bridge output, V/V (shown as mV/V)',
    V: 'volts, V',
    count: 'counts of the converter',
    Cel: 'temperature, °C',
    N: 'force, N',
    m: 'length, m',
  },
  right: { x: 'x', y: 'y', '-x': 'x, turned round', '-y': 'y, turned round' },
  circuit: {
    quarter: 'Quarter bridge',
    'half-poisson': 'Half bridge, lengthwise and crosswise gauge',
    'half-bending': 'Half bridge, bending',
    'half-opposite': 'Half bridge, opposite arms',
    'full-bending': 'Full bridge, bending',
    'full-bending-poisson': 'Full bridge, bending with crosswise pair',
    'full-axial-poisson': 'Full bridge, axial with crosswise pair',
    'full-torsion': 'Full bridge, gauges at ±45° (shear)',
  },
  kind: {
    ratio: 'bridge output, V/V',
    volts: 'volts of the bridge',
    'counts-as-ratio': 'counts, known in mV/V',
    'counts-as-volts': 'counts, known in µV',
    direct: 'the signal of a transducer, or its figure',
    bridge: 'strain gauges in a bridge',
    linear: 'transducer with a rated output',
    'as-is': 'the figure as the node gives it',
    none: 'none worth counting, or sensed away',
    'two-wire': 'two wires: both in the gauge’s arm',
    'three-wire': 'three wires: one in the arm, one in the adjacent arm',
    excitation: 'full bridge: excitation drops along two conductors',
    rosette: 'rosette of three gauges',
    section: 'section forces from three or more gauges',
    mean: 'mean of channels',
    difference: 'difference of two channels',
    expression: 'expression over channels',
    unloaded: 'unloaded: nothing but its own weight',
    loaded: 'under a stated load',
  },
  on: {
    'thick-aluminium-or-copper': 'thick aluminium or copper',
    'thick-steel': 'thick steel',
    'thin-steel': 'thin steel',
    'glass-ceramic-or-composite': 'glass, ceramic or composite',
    'unfilled-plastic': 'unfilled plastic',
  },
  level: { caution: 'caution limit', stop: 'stop limit' },
  basis: {
    share_of_yield: 'share of yield',
    stress_MPa: 'stress',
    strain_microstrain: 'strain',
    force_kN: 'force',
    displacement_mm: 'displacement',
    temperature_Cel: 'temperature',
    moment_kN_m: 'moment',
    angle_degree: 'angle',
    number: 'number',
  },
  layout: { rectangular: '0/45/90', delta: '0/60/120' },
  quantity: {
    axial: 'axial force N',
    'about-y': 'moment My',
    'about-z': 'moment Mz',
    residual: 'residual of the gauges about a plane',
    'highest-stress': 'highest stress of the section’s corners',
    'lowest-stress': 'lowest stress of the section’s corners',
  },
  value_unit: { Cel: '°C' },
};

export const choiceText = (key: string, value: string): string =>
  CHOICES[key]?.[value] ?? value.replaceAll('-', ' ');

const HELP: Readonly<Record<string, string>> = {
  stated_V: 'At the bridge, as somebody states it. Either this, or the input that measures it.',
  measured_by_input: 'An input of the same node in V, sample by sample.',
  highest_limit_share_of_yield: 'No limit may pass this share of yield.',
  value: 'In tension and compression alike.',
  deadband: 'Returns to normal this far below the limit.',
  simulated: 'Of simulated nodes: said on every screen and in every export.',
  node: 'The node that measures it.',
  input: 'Of the node; read by no other channel.',
};

/** What is said under a field: of the schema, unless its choices have words of their own. */
export const helpOf = (key: string, description: string | undefined): string | undefined =>
  HELP[key] ?? (key in CHOICES || key === 'valid_from' ? undefined : description);

/** One of a list: what it is. */
const ONE: Readonly<Record<string, string>> = {
  nodes: 'node',
  inputs: 'input',
  structures: 'structure',
  members: 'member',
  elevations: 'elevation',
  stations: 'station',
  channels: 'channel',
  virtual: 'virtual channel',
  calibration: 'calibration record',
  zeros: 'zero',
  limits: 'limit',
  default_limits: 'limit',
  gauges: 'gauge',
};

export const oneOf = (key: string): string => ONE[key] ?? 'entry';

/** What a person calls a part: its own name, or what it is. */
export const titleOf = (site: Json, path: Path): string => {
  const part = valueAt(site, path);
  const [key, parent] = [path.at(-1), path.at(-2)];
  if (key === undefined) return textAt(part, 'name') ?? 'Site';
  if (!/^\d+$/.test(key)) return labelOf(key);
  const id = nameOf(part);
  const name = textAt(part, 'name');
  const what = oneOf(parent ?? '');
  if (id === null || id === '') return `New ${what}`;
  return name === null || name === id ? id : name;
};

/** Where a difference or fault is, in words: `Main beam 1 › B1-mid › Gauge factor`. */
export const differencePlace = (path: Path): string =>
  path
    .map((part) => (part.startsWith('=') ? part.slice(1) : labelOf(part)))
    .filter((_, i) => path[i + 1]?.startsWith('=') !== true)
    .join(' › ');

/** As `differencePlace`, of a path of places in a document. */
export const placeInWords = (site: Json, path: Path): string =>
  path
    .flatMap((_, i) => {
      const here = path.slice(0, i + 1);
      return /^\d+$/.test(path[i + 1] ?? '') ? [] : titleOf(site, here);
    })
    .join(' › ') || 'Site';

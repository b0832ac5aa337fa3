import { HEAT_SINKS } from '../../../shared/model/calibration.ts';
import { ROSETTE_LAYOUTS, ROSETTE_QUANTITIES } from '../../../shared/model/rosette.ts';
import { SECTION_QUANTITIES } from '../../../shared/model/virtual.ts';
import {
  exactly,
  figure,
  flag,
  list,
  map,
  oneOf,
  orNull,
  ref,
  text,
  time,
  word,
  type Schema,
} from './schema.ts';

const tuple = (length: number, description: string): Schema => ({
  ...list({ type: 'number' }, description),
  minItems: length,
  maxItems: length,
});

const counts = (as: string, extra: Readonly<Record<string, Schema>> = {}): Schema =>
  map('(count − zeroCount) · perCount', {
    kind: exactly('counts'),
    as: exactly(as),
    perCount: figure('V/V or V for a count'),
    zeroCount: figure('The count at nought'),
    ...extra,
  });

const CHANNEL_HEAD = {
  id: text('Unique in the site'),
  name: text('As people say it'),
  measurand: ref('Measurand'),
  limits: list(ref('Limit'), 'As the set-up has them; /api/channels has those in force'),
};

const RECORD_HEAD = {
  id: text('Unique in the site'),
  validFrom: time('Begin'),
  author: text('Who wrote it'),
  reason: text('Why'),
  recordedAt: orNull(time('When it was added'), 'null: it came with the site file'),
  corrects: orNull(text('Id'), 'The record that it takes the place of; null: none'),
};

/** The site as it was checked: shared/model/site.ts and calibration.ts in JSON Schema. Figures are SI. */
export const SITE_SCHEMAS: Readonly<Record<string, Schema>> = {
  Site: map('What is watched', {
    id: text('Short name'),
    name: text('As people say it'),
    simulated: flag('true: the nodes are simulated, and so is every figure'),
    highestLimit: figure('The share of yield that no limit may pass'),
    structures: list(ref('Structure')),
    nodes: list(ref('FieldNode')),
  }),
  Structure: map('A structure', {
    id: text('Unique in the site'),
    name: text('As people say it'),
    members: list(ref('Member')),
    elevations: list(ref('Elevation'), 'Side views'),
    loadChannel: orNull(text('Id'), 'The channel that says how much load is on; null: none does'),
    safeWorkingLoad: orNull(figure('N'), 'N; null: not stated'),
  }),
  Elevation: map('A side view', {
    name: text('As people say it'),
    right: word('The site axis that runs to the right', 'x', 'y', '-x', '-y'),
    members: list(text('Id of a member'), 'What it shows'),
  }),
  Member: map('A beam, leg or tie', {
    id: text('Unique in the structure'),
    name: text('As people say it'),
    section: ref('Section'),
    material: ref('Material'),
    from: tuple(3, 'Start of the axis: x, y level, z up, m'),
    to: tuple(3, 'End of the axis, m'),
    stations: list(ref('Station')),
  }),
  Section: map('A cross-section; axes as EN 1993-1-1 §1.7', {
    designation: text('Name in its standard'),
    source: text('That standard'),
    height: figure('m'),
    width: figure('m'),
    area: figure('m²'),
    inertiaY: figure('m⁴'),
    inertiaZ: figure('m⁴'),
    modulusY: figure('m³'),
    modulusZ: figure('m³'),
    thickness: figure('Of the thickest plate or wall, m'),
  }),
  Material: map('A grade at the thickness of its member', {
    designation: text('Name in its standard'),
    source: text('That standard'),
    youngsModulus: figure('Pa'),
    poisson: figure("Poisson's ratio"),
    expansion: figure('Linear thermal expansion, 1/K'),
    yieldStrength: figure('Yield or 0.2 % proof strength, Pa'),
  }),
  Station: map('A place on a member', {
    id: text('Unique in the structure'),
    at: figure('Distance from the start of the member, m'),
    channels: list(ref('Channel')),
  }),
  Channel: oneOf(
    'What is known at a station',
    map('Measured', {
      ...CHANNEL_HEAD,
      kind: exactly('measured'),
      node: text('Id of the node that measures it'),
      input: text('Name of the input on that node'),
      calibration: { ...list(ref('CalibrationRecord'), 'In the order added'), minItems: 1 },
      zeros: list(ref('ZeroRecord'), 'In the order added'),
    }),
    map('Virtual', { ...CHANNEL_HEAD, kind: exactly('virtual'), definition: ref('Definition') }),
  ),
  Definition: oneOf(
    'How a virtual channel comes from others',
    map('Of a rosette; ASTM E1561', {
      kind: exactly('rosette'),
      layout: word('0/45/90 or 0/60/120 degrees', ...ROSETTE_LAYOUTS),
      gauges: list(text('Id'), 'Channels a, b, c, counter-clockwise'),
      quantity: word('What of it', ...ROSETTE_QUANTITIES),
    }),
    map('Of the gauges of a section', {
      kind: exactly('section'),
      gauges: list(
        map('A gauge', { channel: text('Id'), y: figure('To the side, m'), z: figure('Up, m') }),
      ),
      quantity: word('What of it', ...SECTION_QUANTITIES),
    }),
    map('Mean', { kind: exactly('mean'), of: list(text('Id')) }),
    map('The first less the second', { kind: exactly('difference'), of: list(text('Id')) }),
    map('Arithmetic over channels in SI units', {
      kind: exactly('expression'),
      text: text('The expression'),
      names: {
        type: 'object',
        description: 'Ids by the names that stand for them',
        additionalProperties: { type: 'string' },
      },
    }),
  ),
  CalibrationRecord: map('In force until the next of its channel', {
    ...RECORD_HEAD,
    signal: ref('Signal'),
    response: ref('Response'),
  }),
  ZeroRecord: map('A zero that was read, in place of the one in the calibration record', {
    ...RECORD_HEAD,
    raw: figure('Mean of the raw figures, over V of excitation if that is measured'),
    noise: figure('Their standard deviation'),
    samples: figure('How many they were'),
    temperature: orNull(figure('°C'), 'Of the structure at the gauge; null: not known'),
    state: oneOf(
      'What was on the structure',
      map('Nothing but its own weight', { kind: exactly('unloaded') }),
      map('A load', { kind: exactly('loaded'), load: figure('N') }),
    ),
  }),
  Excitation: oneOf(
    'Where the excitation of a bridge is known from',
    map('Stated', { kind: exactly('stated'), volts: figure('V') }),
    map('Measured by another input', { kind: exactly('measured'), input: text('Its name') }),
  ),
  Signal: oneOf(
    "What the node's figure is",
    map('Bridge output, V/V', { kind: exactly('ratio') }),
    map('Bridge output, V', { kind: exactly('volts'), excitation: ref('Excitation') }),
    counts('ratio'),
    counts('volts', { excitation: ref('Excitation') }),
    map('Already N, m, °C, or the voltage of a transducer', { kind: exactly('direct') }),
  ),
  Leads: oneOf(
    'Lead wires; resistance is of one conductor, Ω',
    map('None worth counting', { kind: exactly('none') }),
    map('Both in the arm', {
      kind: exactly('two-wire'),
      resistance: figure('Ω'),
      trimmed: flag('The adjacent arm holds as much'),
    }),
    map('Three wires', { kind: exactly('three-wire'), resistance: figure('Ω') }),
    map('Of the excitation', { kind: exactly('excitation'), resistance: figure('Ω') }),
  ),
  Response: oneOf(
    'How the signal becomes strain, N, m or °C',
    map('A bridge of gauges', {
      kind: exactly('bridge'),
      circuit: word(
        'Which arms measure what',
        ...['quarter', 'half-poisson', 'half-bending', 'half-opposite', 'full-bending'],
        ...['full-bending-poisson', 'full-axial-poisson', 'full-torsion'],
      ),
      gaugeFactor: figure('ΔR/R for a strain of 1'),
      gaugeResistance: figure('Ω'),
      poisson: figure("Poisson's ratio of the member"),
      leads: ref('Leads'),
      temperature: orNull(
        map('Correction for the temperature of the gauge', {
          channel: text('Id of the channel that measures it'),
          zeroAt: figure('In the zero state of the record, °C'),
          factorPerKelvin: figure('Change of the gauge factor, 1/K'),
          reference: figure('Where the gauge factor is stated, °C'),
          thermalOutput: orNull(
            map('Polynomial in °C', {
              coefficients: list(figure('m/m per °C to its power'), 'From power 0'),
              gaugeFactor: figure('That it is quoted for'),
            }),
            'null: none to take off',
          ),
        }),
        'null: not put right for',
      ),
      transverseSensitivity: figure('Kt, a share'),
      grid: orNull(
        map('Measuring grid', {
          length: figure('m'),
          width: figure('m'),
          on: word('What it is bonded to', ...HEAT_SINKS),
        }),
        'null: not stated',
      ),
      zero: figure("Bridge output of the structure's zero state, V/V"),
    }),
    map('(signal − zero) · perUnit', {
      kind: exactly('linear'),
      perUnit: figure('N, m or °C for a unit of the signal'),
      zero: figure('Signal at nought'),
    }),
  ),
  FieldNode: map('A node that measures', {
    id: text('Unique in the site'),
    name: text('As people say it'),
    inputs: list(ref('NodeInput')),
    staleAfter: figure('s without a frame until its channels are stale'),
  }),
  NodeInput: map('An input of a node', {
    name: text('Unique on the node'),
    unit: word('What its figures are', '/', 'V', 'count', 'Cel', 'N', 'm'),
    range: orNull(tuple(2, 'Low and high end'), 'At or beyond: over range; null: not stated'),
  }),
};

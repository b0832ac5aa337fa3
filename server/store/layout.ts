import type { Frame, InputBlock, RawArray } from '../../shared/model/frame.ts';

/** What a node's frames consist of, the same for all alike: inputs and their types, in order. */
export interface Layout {
  readonly inputs: readonly { readonly input: string; readonly type: ArrayType }[];
}

export const ARRAY_TYPES = ['f4', 'f8', 'i2', 'i4'] as const;
export type ArrayType = (typeof ARRAY_TYPES)[number];

const WIDTH: Readonly<Record<ArrayType, number>> = { f4: 4, f8: 8, i2: 2, i4: 4 };

export const typeOf = (samples: RawArray): ArrayType => {
  if (samples instanceof Float32Array) return 'f4';
  if (samples instanceof Float64Array) return 'f8';
  return samples instanceof Int16Array ? 'i2' : 'i4';
};

const view = (type: ArrayType, buffer: ArrayBuffer, offset: number, count: number): RawArray => {
  switch (type) {
    case 'f4':
      return new Float32Array(buffer, offset, count);
    case 'f8':
      return new Float64Array(buffer, offset, count);
    case 'i2':
      return new Int16Array(buffer, offset, count);
    case 'i4':
      return new Int32Array(buffer, offset, count);
  }
};

/** `f4 s1,i2 s2`: names have neither blanks nor commas. */
export const layoutText = (inputs: readonly InputBlock[]): string =>
  inputs.map(({ input, samples }) => `${typeOf(samples)} ${input}`).join(',');

export const parseLayout = (text: string): Layout => ({
  inputs: text.split(',').map((entry) => {
    const type = ARRAY_TYPES.find((candidate) => entry.startsWith(`${candidate} `));
    if (!type) throw new Error(`layout in store: expected a type, came ${entry}`);
    return { type, input: entry.slice(3) };
  }),
});

/** Arrays begin at multiples of 8 bytes, so that they can be read in place. */
const padded = (bytes: number): number => Math.ceil(bytes / 8) * 8;

/** All inputs' samples, as measured, in one buffer of just their size: what is stored. */
export const packBody = ({ inputs }: Frame): ArrayBuffer => {
  const sizes = inputs.map(({ samples }) => padded(samples.byteLength));
  const body = new Uint8Array(sizes.reduce((sum, size) => sum + size, 0));
  let at = 0;
  inputs.forEach(({ samples }, i) => {
    body.set(new Uint8Array(samples.buffer, samples.byteOffset, samples.byteLength), at);
    at += sizes[i] ?? 0;
  });
  return body.buffer;
};

/** The inputs of a body; views on `body`, which must begin at a multiple of 8 bytes. */
export const unpackBody = (layout: Layout, body: Uint8Array, count: number): InputBlock[] => {
  const whole =
    body.byteOffset % 8 === 0 && body.buffer instanceof ArrayBuffer
      ? { buffer: body.buffer, start: body.byteOffset }
      : { buffer: new Uint8Array(body).buffer, start: 0 };
  let at = whole.start;
  return layout.inputs.map(({ input, type }) => {
    const samples = view(type, whole.buffer, at, count);
    at += padded(count * WIDTH[type]);
    return { input, samples };
  });
};

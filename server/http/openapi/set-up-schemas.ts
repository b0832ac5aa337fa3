import {
  count,
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

const HEAD = {
  revision: count('1, 2, 3, …'),
  at: time('In force from'),
  author: text('Who'),
  reason: text('Why'),
  origin: word('Read from the file at start, or changed on screen', 'file', 'screen'),
};

const DOCUMENT: Schema = {
  type: 'object',
  description: 'The site file as docs/site.schema.json describes it, limits in force in it',
};

const EXTREMES = orNull(
  map('Least and greatest', { min: figure('SI'), max: figure('SI') }),
  'null: nothing believed in the window',
);

export const SET_UP_SCHEMAS: Readonly<Record<string, Schema>> = {
  SetUpAnswer: map('The set-up that stands', {
    simulated: flag('true: the site is simulated'),
    ...HEAD,
    document: DOCUMENT,
  }),
  SetUpRequest: map('Another set-up in place of the one that stands', {
    document: DOCUMENT,
    basedOn: count('The revision that it was made from'),
    author: text('Who'),
    reason: text('Why'),
  }),
  SetUpPreviewRequest: map('A set-up to be tried on the past', { document: DOCUMENT }),
  RevisionsAnswer: map('Revisions of the set-up', {
    simulated: flag('true: the site is simulated'),
    revisions: list(map('A revision', HEAD), 'Newest first'),
  }),
  SetUpConflict: map('Somebody else changed it first', {
    error: text('In words'),
    faults: list(ref('Fault')),
    revision: count('The one that stands'),
    at: time('Since'),
    author: text('Whose it is'),
    reason: text('Why'),
  }),
  PreviewLine: oneOf(
    'A line of the preview',
    map('How far it is', {
      kind: exactly('progress'),
      done: count('Pieces looked at'),
      of: count('Pieces in all'),
    }),
    map('The end of it', {
      kind: exactly('result'),
      channels: list(ref('ChannelChange'), 'Those whose past would be another one'),
    }),
  ),
  ChannelChange: map("What a change would make of a channel's past, SI", {
    channel: text('Id'),
    from: time('Begin of what changes'),
    to: time('Its end'),
    points: count('Points that were compared'),
    before: EXTREMES,
    after: EXTREMES,
    largest: orNull(
      map('Of the means of points', {
        at: time('When'),
        before: figure('SI'),
        after: figure('SI'),
      }),
      'null: no point has both',
    ),
  }),
};

/** Writes frames as fast as they become durable, says which are, until it is killed. */
import { openSqliteStores } from '../../server/store/sqlite/open.ts';
import { stormFrame } from './storm.ts';

const [folder = '', first = '0'] = process.argv.slice(2);
const { samples } = await openSqliteStores(folder, { n1: [{ input: 'a', over: 'ex' }] });
process.send?.('open');
for (let batch = Number(first); ; batch++) {
  const frames = Array.from({ length: 1 + (batch % 7) }, (_, i) => stormFrame(batch * 7 + i));
  await samples.commit(frames);
  process.send?.(frames.map(({ frame }) => frame.seq));
}

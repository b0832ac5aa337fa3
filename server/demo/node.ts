/** The process of one simulated node: measures a lift that is not there, and publishes it. */
import { randomUUID } from 'node:crypto';
import { epochSeconds, seconds, type EpochSeconds } from '../../shared/model/units.ts';
import type { FieldNode } from '../../shared/model/site.ts';
import { answerTopic, commandTopic } from '../../shared/pipeline/1-decode/command.ts';
import { encodeFrame } from '../../shared/pipeline/1-decode/frame.ts';
import { encodeSenml } from '../../shared/pipeline/1-decode/senml.ts';
import { topicOf } from '../../shared/pipeline/1-decode/topics.ts';
import { planSite } from '../../shared/pipeline/index.ts';
import { writeCbor } from '../ingest/cbor.ts';
import { compileExpression } from '../site/expression.ts';
import { loadSite } from '../site/load.ts';
import { NODE_USAGE, readNodeArguments, type NodeArguments } from './arguments.ts';
import { obey } from './command.ts';
import { demoTopic, readFaultRequest } from './fault-request.ts';
import { openLink, type Link } from './link.ts';
import { eachPeriod } from './pace.ts';
import { seededRandom } from './random.ts';
import { createSampler, type Sampler } from './sampler.ts';

/** A slow node reads its sensors so often, s. */
const SLOW_PERIOD = 5;
/** Frames kept while the broker is out of reach: an hour of ten a second. */
const MOST_PENDING = 36_000;
/** Frames made up for after the machine has slept. */
const MOST_BEHIND = 100;

const say = (line: string) => process.stdout.write(`${line}\n`);
const now = (): EpochSeconds => epochSeconds(Date.now() / 1e3);

const isSlow = ({ inputs }: FieldNode): boolean => inputs.every(({ unit }) => unit === 'Cel');

const sendReadings = (node: FieldNode, sampler: Sampler, link: Link) => {
  const send = () => {
    const time = now();
    const readings = sampler.block(time, 0, 1).map(({ input, samples }, i) => ({
      ...{ name: `${node.id}/${input}`, time, value: Number((samples[0] ?? NaN).toFixed(2)) },
      unit: node.inputs[i]?.unit ?? '/',
    }));
    link.publish(topicOf(node.id, 'senml/json'), JSON.stringify(encodeSenml(readings, 'json')));
  };
  send();
  return eachPeriod(SLOW_PERIOD, 1, send);
};

const sendFrames = (
  node: FieldNode,
  boot: string,
  { rate, samples }: NodeArguments,
  sampler: Sampler,
  link: Link,
) => {
  const dt = seconds(1 / (rate * samples));
  let seq = 0;
  return eachPeriod(1 / rate, MOST_BEHIND, (index) => {
    const t0 = epochSeconds(index / rate);
    const inputs = sampler.block(t0, dt, samples);
    const frame = { node: node.id, boot, seq: seq++, sequenced: true, t0, dt, inputs };
    if (link.pending() < MOST_PENDING) {
      link.publish(topicOf(node.id, 'frame'), writeCbor(encodeFrame(frame)));
    }
  });
};

const answerCommand = (parsed: unknown, node: FieldNode, sampler: Sampler, link: Link) => {
  const answer = obey(parsed, node, sampler, now());
  if (answer.ok) return link.publish(answerTopic(node.id), JSON.stringify(answer.value));
  const { field, expected, came } = answer.refusal;
  say(`command: ${field}: expected ${expected}, came ${came}`);
};

const hear = (node: FieldNode, sampler: Sampler, link: () => Link) => {
  const inputs = node.inputs.map(({ name }) => name);
  return (topic: string, payload: Uint8Array) => {
    let parsed: unknown;
    try {
      parsed = JSON.parse(new TextDecoder().decode(payload));
    } catch {
      return say(`${topic}: expected JSON, came something else`);
    }
    if (topic === commandTopic(node.id)) return answerCommand(parsed, node, sampler, link());
    const isMine = topic === demoTopic(node.id);
    const request = readFaultRequest(parsed, inputs);
    if (!request.ok) {
      const { field, expected, came } = request.refusal;
      return isMine ? say(`${topic}: ${field}: expected ${expected}, came ${came}`) : undefined;
    }
    const isForAll = ['overload-bump', 'sun', 'none'].includes(request.value.fault);
    if (!isMine && !isForAll) return;
    sampler.play(request.value, now());
    if (request.value.fault === 'drop-out') link().dropOut(request.value.seconds);
    say(`plays ${request.value.fault}`);
  };
};

const main = async () => {
  const args = readNodeArguments(process.argv.slice(2));
  const read = await loadSite(args.siteFile);
  if (!read.ok) throw new Error(`${args.siteFile}: not a valid site file`);
  const node = read.site.nodes.find(({ id }) => id === args.node);
  if (!node) throw new Error(`--node: expected one of the site's, came ${args.node}`);
  const boot = randomUUID().slice(0, 8);
  const plan = planSite(read.site, compileExpression);
  const random = seededRandom(args.seed);
  const sampler = createSampler({ plan, node, begin: args.begin, random });
  const link: Link = openLink({
    ...{ broker: args.broker, node: node.id, boot, say },
    connected: () => process.send?.('connected'),
    heard: hear(node, sampler, () => link),
  });
  const stopSending = isSlow(node)
    ? sendReadings(node, sampler, link)
    : sendFrames(node, boot, args, sampler, link);
  const stop = () => {
    stopSending();
    void link.stop().then(() => process.exit(0));
  };
  process.once('SIGINT', stop);
  process.once('SIGTERM', stop);
  // Started by a fleet: it is gone.
  process.once('disconnect', stop);
};

main().catch((error: unknown) => {
  const why = error instanceof Error ? error.message : String(error);
  process.stderr.write(`${why}\n\n${NODE_USAGE}\n`);
  process.exitCode = 2;
});

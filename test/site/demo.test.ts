import { fileURLToPath } from 'node:url';
import { describe, expect, test } from 'vitest';
import { loadSite } from '../../server/site/load.ts';
import { measuredOf } from '../../shared/model/site.ts';
import { limitContextOf } from '../../shared/pipeline/index.ts';
import { thresholdOf } from '../../shared/pipeline/5-alarm/threshold.ts';
import { demoFile, demo, pointersIn } from './edit.ts';

const read = await loadSite(fileURLToPath(demoFile));
if (!read.ok) throw new Error(JSON.stringify(read.faults, null, 2));
const { site } = read;
const [lift] = site.structures;
const channels = measuredOf(site);
const channelOf = (id: string) => {
  const found = channels.find(({ channel }) => channel.id === id);
  if (!found) throw new Error(`no channel ${id}`);
  return found;
};
const memberOf = (id: string) => {
  const found = lift?.members.find((member) => member.id === id);
  if (!found) throw new Error(`no member ${id}`);
  return found;
};

describe("the demo site is the boatyard's travelling lift", () => {
  test('every channel of the file is in the site, in the order of the file', () => {
    const inFile = pointersIn(demo).filter((p) => /\/channels\/\d+$/.test(p));
    expect(channels.length).toBe(inFile.length);
    expect(site.simulated).toBe(true);
    expect(lift?.safeWorkingLoad).toBe(100e3);
  });

  test('two beams HE 300 B of 6 m, four legs HE 200 B, S275 by flange thickness, and a tie', () => {
    for (const id of ['B1', 'B2']) {
      const { section, material, from, to } = memberOf(id);
      expect(section.designation).toBe('HE 300 B');
      expect(Math.hypot(to[0] - from[0], to[1] - from[1], to[2] - from[2])).toBe(6);
      expect(material.yieldStrength).toBe(265e6); // EN 10025-2, 16 < t = 19 ≤ 40 mm
    }
    for (const id of ['L1', 'L2', 'L3', 'L4']) {
      expect(memberOf(id).section.designation).toBe('HE 200 B');
      expect(memberOf(id).material.yieldStrength).toBe(275e6); // EN 10025-2, t = 15 ≤ 16 mm
    }
    expect(memberOf('T1').stations.length).toBeGreaterThan(0);
  });

  test('three elevations that show every member', () => {
    const shown = lift?.elevations.map(({ name, members }) => [name, ...members]);
    expect(shown).toEqual([
      ['Portal 1', 'B1', 'L1', 'L2'],
      ['Portal 2', 'B2', 'L3', 'L4'],
      ['Side', 'T1', 'L1', 'L3'],
    ]);
  });

  test('two nodes of at most 16 inputs and a slow one; every input is read', () => {
    const counts = site.nodes.map(({ id, inputs }) => [id, inputs.length]);
    expect(counts.map(([id]) => id)).toEqual(['n1', 'n2', 'yard']);
    for (const { id, inputs } of site.nodes) {
      expect(inputs.length).toBeLessThanOrEqual(16);
      const reads = channels
        .filter(({ channel }) => channel.node === id)
        .flatMap(({ channel }) => [
          channel.input,
          ...channel.calibration.flatMap(({ signal }) =>
            'excitation' in signal && signal.excitation.kind === 'measured'
              ? [signal.excitation.input]
              : [],
          ),
        ]);
      expect(inputs.map(({ name }) => name).sort()).toEqual([...new Set(reads)].sort());
    }
  });

  test('four flange-tip gauges at midspan of each beam, and a rosette near a support', () => {
    for (const beam of ['B1', 'B2']) {
      for (const place of ['top-left', 'top-right', 'bottom-left', 'bottom-right']) {
        const { channel, station } = channelOf(`${beam}-mid-${place}`);
        expect(station.at).toBe(3);
        expect(channel.calibration[0]?.response).toMatchObject({ circuit: 'quarter' });
      }
      expect(channelOf(`${beam}-third1-bending`).station.at).toBe(2);
      expect(channelOf(`${beam}-third2-bending`).station.at).toBe(4);
      expect(channelOf(`${beam}-mid-deflection`).channel.measurand).toBe('displacement');
    }
    for (const angle of [0, 45, 90]) {
      const { channel, station } = channelOf(`B1-end-web-${angle}`);
      expect(channel.measurand).toBe('strain');
      expect(station.at).toBeLessThan(0.6);
    }
  });

  test('every circuit, every kind of signal and of excitation is alive', () => {
    const records = channels.flatMap(({ channel }) => channel.calibration);
    const circuits = records.flatMap(({ response: r }) => (r.kind === 'bridge' ? [r.circuit] : []));
    expect(new Set(circuits).size).toBe(8);
    const signals = records.map(({ signal: s }) =>
      [
        s.kind,
        ...('as' in s ? [s.as] : []),
        ...('excitation' in s ? [s.excitation.kind] : []),
      ].join(' '),
    );
    expect([...new Set(signals)].sort()).toEqual([
      'counts ratio',
      'counts volts measured',
      'counts volts stated',
      'direct',
      'ratio',
      'volts measured',
      'volts stated',
    ]);
    expect(new Set(channels.map(({ channel }) => channel.measurand)).size).toBe(5);
    const bases = channels.flatMap(({ channel }) => channel.limits.map(({ basis }) => basis));
    expect(new Set(bases)).toEqual(new Set(['share', 'stress', 'strain', 'value']));
    for (const { author } of records) expect(author).toMatch(/^Simulated /);
  });

  test('the load cell has 2 mV/V at 200 kN, in force from its latest record on', () => {
    const { channel } = channelOf('hook-load');
    expect(lift?.loadChannel).toBe('hook-load');
    expect(channel.calibration.length).toBe(2);
    for (const { response } of channel.calibration) {
      if (response.kind !== 'linear') throw new Error('expected a linear response');
      expect(Math.abs(response.perUnit / (200e3 / 2e-3) - 1)).toBeLessThan(0.001);
    }
  });

  test('its limits let the proof of 1.25 times the safe working load through, not much more', () => {
    const { channel, member } = channelOf('hook-load');
    const stop = channel.limits.find(({ level }) => level === 'stop');
    expect(stop?.value).toBeGreaterThan(1.25 * 100e3);
    expect(stop?.value).toBeLessThan(1.1 * 1.25 * 100e3);
    // M = P·L/4, σ = M/W, δ = P·L³/(48·E·I): any handbook. Half the load on each beam.
    const { section, material } = member;
    const [load, span] = [62.5e3, 6];
    const stress = (load * span) / 4 / section.modulusY;
    expect(stress / 1e6).toBeCloseTo(55.88, 2);
    const tip = channelOf('B1-mid-bottom-left').channel;
    const context = limitContextOf(tip, member, site);
    for (const limit of tip.limits) {
      expect(thresholdOf(limit, context).raise).toBeGreaterThan(stress / material.youngsModulus);
    }
    const sag = (load * span ** 3) / (48 * material.youngsModulus * section.inertiaY);
    expect(sag * 1e3).toBeCloseTo(5.32, 2);
    for (const { value } of channelOf('B1-mid-deflection').channel.limits) {
      expect(value).toBeGreaterThan(sag);
    }
  });
});

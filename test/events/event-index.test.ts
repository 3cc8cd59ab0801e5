import { execFileSync } from 'node:child_process';
import { resolve } from 'node:path';
import { describe, expect, it } from 'vitest';
import { eventHeading, eventIndexer, shardRange, trackText } from '../../src/events/event-index.js';

const HEAD = 'event,time,lat_deg,lon_deg,vmax_mps,rate';

function index(rows: readonly string[]) {
  const heading = eventHeading(HEAD, 'set.csv');
  const indexer = eventIndexer(heading, 'set.csv');
  let at = HEAD.length + 1;
  for (const [i, row] of rows.entries()) {
    indexer.add(row, at, at + row.length + 1, i + 2);
    at += row.length + 1;
  }
  return indexer.finish();
}

describe('the index of an event table', () => {
  it('knows where each event stands, and its rate', () => {
    const rows = ['A,t0,1,2,3,0.1', 'A,t1,1,2,3,0.1', 'B,t0,1,2,3,', 'C,t0,1,2,3,2'];
    const events = index(rows);
    expect(events.map(({ id, row, rate }) => [id, row, rate])).toEqual([
      ['A', 2, 0.1],
      ['B', 4, Number.NaN],
      ['C', 5, 2],
    ]);
    const text = `${HEAD}\n${rows.join('\n')}\n`;
    expect(text.slice(events[0]!.start, events[0]!.end)).toBe(`${rows[0]}\n${rows[1]}\n`);
    expect(text.slice(events[2]!.start, events[2]!.end)).toBe(`${rows[3]}\n`);
  });

  it('refuses what it cannot tell apart, with row and remedy', () => {
    expect(() => index(['A,t,1,2,3,1', 'B,t,1,2,3,1', 'A,t,1,2,3,1'])).toThrow(/row 4: event 'A' comes again.*sort/);
    expect(() => index([',t,1,2,3,1'])).toThrow(/row 2: the event has no id/);
    expect(() => index(['A,t,1,2,3,-1'])).toThrow(/row 2, event 'A': the rate '-1'/);
    expect(() => index(['A,t,1,2,3,1', 'A,t,1,2,3,2'])).toThrow(
      /row 3, event 'A': the rate '2' is not that of its first/,
    );
    expect(() => index(['"A,B",t,1,2,3,1'])).toThrow(/row 2: a cell is quoted/);
    expect(() => index(['A,t,1,2,3,Infinity'])).toThrow(/the rate 'Infinity'/);
    expect(() => index([])).toThrow(/holds no event/);
    expect(() => eventHeading('storm,time', 'set.csv')).toThrow(/set\.csv: there is no column 'event'/);
  });

  it('makes a track table of an event', () => {
    expect(trackText(eventHeading(HEAD, 's'), 'A,t0,1,2,3,0.1\nA,t1,1,2,3,0.1\n')).toBe(
      'storm,time,lat_deg,lon_deg,vmax_mps\nA,t0,1,2,3\nA,t1,1,2,3\n',
    );
  });

  it('cuts events into shards without gap or overlap', () => {
    for (const [events, shards] of [
      [10, 3],
      [7, 7],
      [100_001, 64],
    ] as const) {
      let next = 0;
      for (let shard = 0; shard < shards; shard++) {
        const [first, end] = shardRange(events, shards, shard);
        expect(first).toBe(next);
        next = end;
      }
      expect(next).toBe(events);
    }
  });
});

describe('invented events', () => {
  const make = (...words: string[]): string =>
    execFileSync(process.execPath, [resolve(import.meta.dirname, '../../scripts/make-events.js'), ...words], {
      encoding: 'utf8',
    });

  it('are the same for a seed, others for another, and the first ones of a larger set', () => {
    const ten = make('--events', '10', '--years', '5');
    expect(make('--events', '10', '--years', '5')).toBe(ten);
    expect(make('--events', '10', '--years', '5', '--seed', '2')).not.toBe(ten);
    expect(make('--events', '12', '--years', '5').startsWith(ten)).toBe(true);
    expect(ten.trimEnd().split('\n')).toHaveLength(1 + 170);
  });
});

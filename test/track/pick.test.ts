import { describe, expect, it } from 'vitest';
import { pickTrack, pickTrackFrom } from '../../src/track/pick.js';
import type { Track } from '../../src/track/track.js';
import { failureOf, readText } from './read/read-text.js';

const storms = (...rows: string[]): Track[] =>
  readText(`storm,name,time,lat_deg,lon_deg\n${rows.map((row) => `${row},2031-09-03T00:00Z,15,-60\n`).join('')}`);
const THREE = storms('QN-01,Quillon', 'TB-02,Tarrabel', 'QN-03,Quillon');

describe('picking a storm', () => {
  it('takes the only one when none is named', () => expect(pickTrack(THREE.slice(0, 1)).id).toBe('QN-01'));

  it.each([
    ['TB-02', 'TB-02'],
    ['tb-02', 'TB-02'],
    ['tarrabel', 'TB-02'],
    [' QN-03 ', 'QN-03'],
  ])('%j is %s', (wanted, id) => expect(pickTrack(THREE, wanted).id).toBe(id));

  it('goes by the id before the name, and by its letters as they stand first', () => {
    expect(pickTrack(storms('a,x', 'b,a'), 'A').id).toBe('a');
    expect(pickTrack(storms('a,x', 'A,y'), 'A').id).toBe('A');
  });

  it('lists the storms when there are several and none is named', () => {
    expect(failureOf(() => pickTrack(THREE))).toMatchObject({
      name: 'UsageError',
      code: 'track.storm-choice',
      message:
        'there are 3 storms: name one by its id or name: QN-01 Quillon (2031-09-03), TB-02 Tarrabel (2031-09-03), QN-03 Quillon (2031-09-03)',
    });
    const many = storms(...Array.from({ length: 50 }, (_, i) => `S${i},`));
    expect(failureOf(() => pickTrack(many)).message).toMatch(/S19 \(2031-09-03\) and 30 more$/);
  });

  it('lists the storms of one name', () => {
    expect(failureOf(() => pickTrack(THREE, 'quillon'))).toMatchObject({
      code: 'track.storm-choice',
      message:
        "2 storms are called 'quillon': name one by its id: QN-01 Quillon (2031-09-03), QN-03 Quillon (2031-09-03)",
    });
  });

  it('answers a near miss with the probable storm', () => {
    expect(failureOf(() => pickTrack(THREE, 'Tarabel'))).toMatchObject({
      name: 'UsageError',
      code: 'track.unknown-storm',
      message: expect.stringContaining("there is no storm 'Tarabel' (did you mean Tarrabel?)"),
    });
    expect(failureOf(() => pickTrack(THREE, '../../x')).message).not.toContain('did you mean');
  });

  it('picks from a stream', async () => {
    async function* stream() {
      yield* THREE;
    }
    expect((await pickTrackFrom(stream(), 'tarrabel')).id).toBe('TB-02');
    await expect(pickTrackFrom(stream())).rejects.toMatchObject({ code: 'track.storm-choice' });
  });
});

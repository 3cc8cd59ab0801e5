import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  bearingDeg,
  coriolisPerS,
  destination,
  distanceM,
  EARTH_RADIUS_M,
  EARTH_ROTATION_PER_S,
  wrapBearing,
  wrapLongitude,
} from '../src/earth.js';

const place = (latDeg: number, lonDeg: number) => ({ latDeg, lonDeg });
const dms = (d: number, m: number, s: number): number => Math.sign(d) * (Math.abs(d) + m / 60 + s / 3600);

describe('coriolisPerS', () => {
  it('is 2Ω sin φ', () => {
    // independent: an arithmetic script with Ω = 7.292115e-5 rad/s
    const expected: [number, number][] = [
      [5, 1.271099],
      [10, 2.532525],
      [15, 3.774676],
      [20, 4.9881],
      [25, 6.163562],
      [30, 7.292115],
      [45, 10.31261],
      [90, 14.58423],
    ];
    for (const [latDeg, f] of expected) expect(Math.abs(coriolisPerS(latDeg) * 1e5 - f)).toBeLessThan(1e-6 * f);
    // identity: sin 30° = 1/2; odd in latitude
    expect(Math.abs(coriolisPerS(30) / EARTH_ROTATION_PER_S - 1)).toBeLessThan(1e-15);
    expect(coriolisPerS(-20)).toBe(-coriolisPerS(20));
    expect(coriolisPerS(0)).toBe(0);
  });
});

describe('distances and bearings on the mean sphere', () => {
  // independent: geodesics on WGS 84 by GeographicLib (GeodSolve); the sphere stays within 0.562 % (a meridian at the equator) and 0.2° of them
  const ellipsoidal: {
    name: string;
    from: ReturnType<typeof place>;
    to: ReturnType<typeof place>;
    m: number;
    az: number;
  }[] = [
    { name: 'New York to London', from: place(40.6, -73.8), to: place(51.6, -0.5), m: 5551759.4, az: 51.198883 },
    {
      name: 'New York to Singapore',
      from: place(dms(40, 38, 23), dms(-73, 46, 44)),
      to: place(dms(1, 21, 33), dms(103, 59, 22)),
      m: 15347627.66,
      az: 3.308312,
    },
    {
      name: 'Flinders Peak to Buninyong',
      from: place(dms(-37, 57, 3.7203), dms(144, 25, 29.5244)),
      to: place(dms(-37, 39, 10.1561), dms(143, 55, 35.3839)),
      m: 54972.271,
      az: dms(306, 52, 5.37),
    },
    { name: 'a degree of latitude', from: place(0, 0), to: place(1, 0), m: 110574.3886, az: 0 },
    { name: 'a degree of longitude', from: place(0, 0), to: place(0, 1), m: 111319.4908, az: 90 },
    {
      name: 'across the antimeridian',
      from: place(10, 179.5),
      to: place(10, -179.5),
      m: 109639.3221,
      az: 89.913174,
    },
  ];
  it.each(ellipsoidal)('keeps within the stated bound of the ellipsoid: $name', ({ from, to, m, az }) => {
    expect(Math.abs(distanceM(from, to) / m - 1)).toBeLessThan(0.00562);
    expect(Math.abs(bearingDeg(from, to) - az)).toBeLessThan(0.2);
  });

  it('agrees with the great circle of the same sphere', () => {
    // independent: GeographicLib with flattening 0 and radius 6371008.771 m
    expect(distanceM(place(40.6, -73.8), place(51.6, -0.5))).toBeCloseTo(
      5536891.96 * (EARTH_RADIUS_M / 6371008.771),
      1,
    );
    // identity: one degree of a great circle is Rπ/180
    expect(distanceM(place(0, 0), place(0, 1))).toBeCloseTo((EARTH_RADIUS_M * Math.PI) / 180, 6);
  });

  it('reaches nearly the same place as the direct geodesic', () => {
    // independent: GeodSolve, direct problem on WGS 84
    const near = destination(place(20, -60), { bearingDeg: 45, distanceM: 100_000 });
    expect(distanceM(near, place(20.63740503, -59.32153311))).toBeLessThan(560);
    const far = destination(place(-20, 150), { bearingDeg: 225, distanceM: 250_000 });
    expect(distanceM(far, place(-21.58834946, 148.29314667))).toBeLessThan(1400);
  });

  it('inverts itself', () => {
    const latitudes = fc.double({ min: -89, max: 89, noNaN: true });
    const longitudes = fc.double({ min: -180, max: 179.999, noNaN: true });
    fc.assert(
      fc.property(
        latitudes,
        longitudes,
        fc.double({ min: 0, max: 359.9, noNaN: true }),
        fc.double({ min: 10, max: 3e6, noNaN: true }),
        (lat, lon, bearing, length) => {
          const from = place(lat, lon);
          const to = destination(from, { bearingDeg: bearing, distanceM: length });
          expect(Math.abs(distanceM(from, to) - length)).toBeLessThan(1e-3 + 1e-9 * length);
          expect(distanceM(to, from)).toBe(distanceM(from, to));
          const back = destination(to, { bearingDeg: bearingDeg(to, from), distanceM: length });
          expect(distanceM(back, from)).toBeLessThan(0.01);
        },
      ),
      { seed: 4711, numRuns: 200 },
    );
  });

  it('gives 0 for coinciding places and survives antipodes', () => {
    expect(distanceM(place(12, 34), place(12, 34))).toBe(0);
    expect(bearingDeg(place(12, 34), place(12, 34))).toBe(0);
    // identity: half a great circle
    expect(distanceM(place(30, 10), place(-30, -170))).toBeCloseTo(Math.PI * EARTH_RADIUS_M, 3);
  });

  it('wraps angles into their ranges', () => {
    expect(wrapLongitude(180)).toBe(-180);
    expect(wrapLongitude(-540)).toBe(-180);
    expect(wrapLongitude(190)).toBe(-170);
    expect(wrapBearing(-90)).toBe(270);
    expect(wrapBearing(-1e-20)).toBe(0);
  });
});

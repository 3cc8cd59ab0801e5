// Invented synthetic storms for demonstrations, tests and benchmarks: plausible motion and life, but no climatology.
// A seed gives the same storms every time. Streamed: any number of events takes the same memory.
// usage: node scripts/make-events.js --events N [--seed S] [--years Y] > events.csv
import { once } from 'node:events';

const argument = (name, otherwise) => {
  const at = process.argv.indexOf(name);
  return at < 0 ? otherwise : Number(process.argv[at + 1]);
};
const events = argument('--events', 10);
const seed = argument('--seed', 1);
const years = argument('--years', Math.max(1, Math.round(events / 10)));
if (!(Number.isInteger(events) && events >= 1 && events <= 1e7)) {
  console.error('--events: a whole number from 1 to 10 million');
  process.exit(2);
}

/** Uniform numbers in 0–1 of an event (mulberry32). */
function generator(event) {
  let state = (Math.imul(seed, 0x9e3779b1) ^ Math.imul(event + 1, 0x85ebca6b)) | 0;
  return () => {
    state = (state + 0x6d2b79f5) | 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

/** Rows of an event: four days, a fix every six hours, westward at first, then poleward. */
function rowsOf(event) {
  const random = generator(event);
  let [lon, lat, heading] = [-35 - 25 * random(), 9 + 9 * random(), 275 + 25 * random()];
  const [weak, strong, speed, turn] = [
    14 + 8 * random(),
    24 + 46 * random() ** 1.5,
    3 + 5 * random(),
    1 + 6 * random(),
  ];
  let rows = '';
  for (let i = 0; i <= 16; i++) {
    const time = `${new Date(Date.UTC(2031, 7, 1, 6 * i)).toISOString().slice(0, 16)}Z`;
    const wind = weak + (strong - weak) * Math.sin((Math.PI * i) / 16);
    const rmax = Math.max(12, 62 - 0.65 * wind + 12 * (random() - 0.5));
    rows += `E${event},${time},${lat.toFixed(4)},${lon.toFixed(4)},${wind.toFixed(2)},${rmax.toFixed(1)},${(1 / years).toPrecision(8)}\n`;
    const degrees = (speed * 21.6) / 111.2;
    const bearing = (heading * Math.PI) / 180;
    lat += degrees * Math.cos(bearing);
    lon += (degrees * Math.sin(bearing)) / Math.cos((lat * Math.PI) / 180);
    heading += turn * random();
  }
  return rows;
}

process.stdout.on('error', () => process.exit(0));
process.stdout.write('event,time,lat_deg,lon_deg,vmax_mps,rmax_km,rate\n');
for (let event = 0; event < events; event++)
  if (!process.stdout.write(rowsOf(event))) await once(process.stdout, 'drain');

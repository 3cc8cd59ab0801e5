const DAY_MS = 86_400_000;
const MONTH_DAYS = [31, 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31];

/** Days from 1970-01-01 in the proleptic Gregorian calendar; identity with `Date.UTC`, without its rule for years below 100. */
function daysFromEpoch(year: number, month: number, day: number): number {
  const y = month <= 2 ? year - 1 : year;
  const era = Math.floor(y / 400);
  const yearOfEra = y - era * 400;
  const dayOfYear = Math.floor((153 * (month + (month > 2 ? -3 : 9)) + 2) / 5) + day - 1;
  const dayOfEra = yearOfEra * 365 + Math.floor(yearOfEra / 4) - Math.floor(yearOfEra / 100) + dayOfYear;
  return era * 146_097 + dayOfEra - 719_468;
}

/** Milliseconds since 1970 of a UTC date and time; NaN for a date that no calendar has. */
export function utcMs(year: number, month: number, day: number, hour: number, minute: number): number {
  if (!(month >= 1 && month <= 12 && hour >= 0 && hour <= 23 && minute >= 0 && minute <= 59)) return Number.NaN;
  const leap = year % 4 === 0 && (year % 100 !== 0 || year % 400 === 0);
  const last = month === 2 && leap ? 29 : MONTH_DAYS[month - 1]!;
  if (!(day >= 1 && day <= last)) return Number.NaN;
  return daysFromEpoch(year, month, day) * DAY_MS + hour * 3_600_000 + minute * 60_000;
}

const ISO =
  /^(\d{4})-(\d\d)-(\d\d)[T ](\d\d):?(\d\d)(?::?(\d\d)(?:\.(\d{1,3})\d*)?)?\s*(?:(Z|UTC)|([+-])(\d\d):?(\d\d)?)?$/i;
const COMPACT = /^(\d{4})(\d\d)(\d\d)[T ]?(\d\d)(\d\d)?Z?$/i;

/** Two digits at `at` as a number; something beyond any clock or calendar when they are not digits. */
function twoDigits(text: string, at: number): number {
  const tens = text.charCodeAt(at) - 48;
  const ones = text.charCodeAt(at + 1) - 48;
  return tens >= 0 && tens <= 9 && ones >= 0 && ones <= 9 ? tens * 10 + ones : 1e6;
}

/**
 * Milliseconds since 1970 of `2031-09-03T06:00Z`, `2031-09-03 06:00:00`, `2031-09-03T16:00+10:00`, `2031090306` or
 * `203109030600`. A time without a zone is UTC.
 * @returns NaN when the text is no time or the date does not exist
 */
export function parseTime(text: string): number {
  if (text.length === 17 && text[4] === '-' && text[7] === '-' && text[13] === ':' && text[16] === 'Z') {
    const mark = text[10];
    if (mark === 'T' || mark === ' ') {
      const year = twoDigits(text, 0) * 100 + twoDigits(text, 2);
      if (year > 9999) return Number.NaN;
      return utcMs(year, twoDigits(text, 5), twoDigits(text, 8), twoDigits(text, 11), twoDigits(text, 14));
    }
  }
  const iso = ISO.exec(text);
  if (iso) {
    const second = Number(iso[6] ?? 0);
    const offsetMinutes = iso[9] ? Number(iso[10]) * 60 + Number(iso[11] ?? 0) : 0;
    if (second > 59 || offsetMinutes > 14 * 60) return Number.NaN;
    const ms = utcMs(Number(iso[1]), Number(iso[2]), Number(iso[3]), Number(iso[4]), Number(iso[5]));
    const fraction = Number((iso[7] ?? '').padEnd(3, '0'));
    return ms + second * 1000 + fraction - (iso[9] === '-' ? -1 : 1) * offsetMinutes * 60_000;
  }
  const compact = COMPACT.exec(text);
  if (!compact) return Number.NaN;
  return utcMs(
    Number(compact[1]),
    Number(compact[2]),
    Number(compact[3]),
    Number(compact[4]),
    compact[5] === undefined ? 0 : Number(compact[5]),
  );
}

/** `2031-09-03T06:00Z`, with seconds and milliseconds only where the time has them. */
export function formatTime(timeMs: number): string {
  const iso = new Date(timeMs).toISOString();
  if (timeMs % 60_000 === 0) return `${iso.slice(0, -8)}Z`;
  return timeMs % 1000 === 0 ? `${iso.slice(0, -5)}Z` : iso;
}

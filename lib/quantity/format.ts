/**
 * The one place that turns numbers into text. Minus is U+2212, thousands of a measured number are parted by a
 * thin space (U+2009), an uncertainty has two figures and its value ends at the same place (JCGM 100:2008, 7.2.6). Values
 * are rounded half away from zero; an uncertainty is rounded up where that is more honest than the nearest figure.
 */
const THIN = '\u2009';
const MINUS = '\u2212';

/** Rounds half away from zero at `places` decimals, as text with a plain hyphen-minus. */
export function roundHalfAway(value: number, places: number): string {
  const text = Math.abs(value).toFixed(Math.min(Math.max(places, 0), 12));
  // toFixed works on the binary value: 1.005 is below its half. A tenth-of-a-ulp nudge restores the written half.
  const nudged = (Math.abs(value) * (1 + 4e-16)).toFixed(Math.min(Math.max(places, 0), 12));
  const chosen = nudged >= text || nudged.length > text.length ? nudged : text;
  return value < 0 && Number(chosen) !== 0 ? `-${chosen}` : chosen;
}

/** "1850.2" -> "1 850.2" with thin spaces; a leading hyphen becomes a minus sign. */
export function groupThousands(text: string): string {
  const [whole, fraction] = text.replace(/^[-\u2212]/, '').split('.');
  const grouped = whole.replace(/\B(?=(\d{3})+$)/g, THIN);
  const sign = /^[-\u2212]/.test(text) ? MINUS : '';
  return sign + grouped + (fraction === undefined ? '' : `.${fraction}`);
}

/** A plain number with a fixed count of decimals, grouped, with a true minus. */
export function formatNumber(value: number, places: number): string {
  return groupThousands(roundHalfAway(value, places));
}

/** As formatNumber, with a plus sign for values above zero: for differences. */
export function formatSigned(value: number, places: number): string {
  const text = roundHalfAway(value, places);
  return Number(text) > 0 ? `+${groupThousands(text)}` : groupThousands(text);
}

/** Decimals that leave two significant figures of an uncertainty; 0 for uncertainties of 10 and more. */
export function placesFor(uncertainty: number): number {
  if (!(uncertainty > 0) || !Number.isFinite(uncertainty)) return 2;
  return Math.max(0, figuresOf(uncertainty).places);
}

/** The most that rounding to the nearest of two figures can take off an uncertainty is 5 % of it; half of that is let go. */
const MOST_TAKEN_OFF = 0.025;

/**
 * An uncertainty at its two figures: to the nearest, but up where the nearest would take off more than 2.5 %. So 10.47 is 11
 * and 28.05 is 28, the two examples of JCGM 100:2008, 7.2.6.
 */
function roundUncertainty(uncertainty: number): { value: number; exponent: number } {
  const exponent = Math.floor(Math.log10(uncertainty)) - 1;
  const unit = 10 ** exponent;
  const figures = uncertainty / unit;
  const nearest = Number(roundHalfAway(figures, 0));
  const up = nearest < figures && figures - nearest > MOST_TAKEN_OFF * figures;
  return { value: (up ? nearest + 1 : nearest) * unit, exponent };
}

/** A number at a place: decimals where it is positive, tens, hundreds where it is negative. */
function atPlace(value: number, places: number): string {
  if (places >= 0) return formatNumber(value, places);
  const unit = 10 ** -places;
  return formatNumber(Number(roundHalfAway(value / unit, 0)) * unit, 0);
}

export interface QuantityText {
  value: string;
  uncertainty: string;
}

/** Value and expanded uncertainty to two figures of the latter: (634.8199, 0.714) -> "634.82", "0.71". */
export function formatQuantity(value: number, expanded: number): QuantityText {
  if (!(expanded > 0) || !Number.isFinite(expanded))
    return {
      value: formatNumber(value, placesFor(expanded)),
      uncertainty: formatNumber(expanded, placesFor(expanded)),
    };
  const { rounded, places } = figuresOf(expanded);
  return { value: atPlace(value, places), uncertainty: atPlace(rounded, places) };
}

/** The rounded uncertainty with the place its second figure stands at; 0.0996 becomes 0.10. */
function figuresOf(uncertainty: number): { rounded: number; places: number } {
  const { value: rounded, exponent } = roundUncertainty(uncertainty);
  const carried = rounded >= 99.5 * 10 ** exponent;
  return { rounded, places: Math.min(12, -(carried ? exponent + 1 : exponent)) };
}

/**
 * The concise form: a value with its standard uncertainty in units of its last place, "634.82(36)" (JCGM 100:2008, 7.2.2).
 * An uncertainty of 1 and more keeps its point: "634.8(1.2)".
 */
export function formatConcise(value: number, u: number): string {
  if (!(u > 0) || !Number.isFinite(u)) return formatNumber(value, 2);
  const { rounded, places } = figuresOf(u);
  const last =
    rounded >= 1 ? roundHalfAway(rounded, Math.max(0, places)) : roundHalfAway(rounded * 10 ** places, 0);
  return `${atPlace(value, places)}(${last})`;
}

/** An index of refraction, its decimals in threes as those of a printed table: "1.000 271 37"; two figures of u where there is one. */
export function formatIndex(n: number, u: number | null): string {
  const [whole, decimals] = roundHalfAway(n, u ? placesFor(u) : 8).split('.');
  return `${whole}.${(decimals.match(/.{1,3}/g) ?? []).join(THIN)}`;
}

/** A number as somebody entered it, without what binary digits add to it: 0.1 + 0.2 is "0.3". */
export function formatEntered(value: number): string {
  return groupThousands(String(Number(value.toPrecision(10))));
}

/** A share as a whole or one-decimal per cent: 0.042 -> "4.2 %". */
export function formatPercent(share: number): string {
  const percent = 100 * share;
  return `${formatNumber(percent, percent >= 10 || percent === 0 ? 0 : 1)} %`;
}

const MONTHS = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec'];

function partsIn(iso: string, timeZone: string): Record<string, string> {
  const format = new Intl.DateTimeFormat('en-GB', {
    timeZone,
    year: 'numeric',
    month: 'numeric',
    day: 'numeric',
    hour: '2-digit',
    minute: '2-digit',
    hourCycle: 'h23',
  });
  return Object.fromEntries(format.formatToParts(new Date(iso)).map((part) => [part.type, part.value]));
}

/** "12 Nov 2026, 09:42" in the lab's time zone. */
export function formatInstant(iso: string, timeZone: string): string {
  const p = partsIn(iso, timeZone);
  return `${Number(p.day)} ${MONTHS[Number(p.month) - 1]} ${p.year}, ${p.hour}:${p.minute}`;
}

/** "12 Nov 2026" in the lab's time zone. */
export function formatDay(iso: string, timeZone: string): string {
  const p = partsIn(iso, timeZone);
  return `${Number(p.day)} ${MONTHS[Number(p.month) - 1]} ${p.year}`;
}

/** A calendar date yyyy-mm-dd as "12 Nov 2026"; it has no time zone. */
export function formatCalendarDate(date: string): string {
  const [year, month, day] = date.split('-').map(Number);
  return `${day} ${MONTHS[month - 1]} ${year}`;
}

/** Bytes as "3.1 MB" (10⁶). */
export function formatBytes(bytes: number): string {
  if (bytes < 1e6) return `${formatNumber(bytes / 1e3, 0)} kB`;
  return `${formatNumber(bytes / 1e6, bytes < 1e8 ? 1 : 0)} MB`;
}

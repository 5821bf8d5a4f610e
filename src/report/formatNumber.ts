/**
 * The one formatter of numbers of the report: as many decimals as two significant figures of the standard uncertainty ask for.
 *
 * @returns `0.4312`; a very large or small number in the form `3.21e-5`; "not determined" when there is none
 * @source JCGM 100:2008, 7.2.6
 */
export function formatValue(value: number | undefined, u: number | undefined): string {
  if (value === undefined || !Number.isFinite(value)) return 'not determined';
  if (u === undefined || !(u > 0) || !Number.isFinite(u)) return significant(value, 4);
  const size = Math.max(Math.abs(value), u);
  if (size >= 1e6 || size < 1e-4) {
    const digits = Math.max(1, Math.min(12, Math.floor(Math.log10(size)) - Math.floor(Math.log10(u)) + 1));
    return minus(value.toExponential(digits));
  }
  return minus(value.toFixed(decimalsOf(u)));
}

/** The uncertainty itself, two significant figures. */
export function formatU(u: number | undefined): string {
  if (u === undefined || !Number.isFinite(u)) return '';
  if (u === 0) return '0';
  return u >= 1e6 || u < 1e-6 ? u.toExponential(1) : u.toFixed(decimalsOf(u));
}

/** `0.4312 (u 0.0011)`, or "not determined". */
export function formatQuantity(value: number | undefined, u: number | undefined): string {
  const text = formatValue(value, u);
  return text === 'not determined' || u === undefined || !(u > 0) ? text : `${text} (u ${formatU(u)})`;
}

/** A share in per cent with its uncertainty: `43.12 % (u 0.11 %)`. */
export function formatPercent(value: number | undefined, u: number | undefined): string {
  if (value === undefined || !Number.isFinite(value)) return 'not determined';
  const text = formatValue(100 * value, u !== undefined ? 100 * u : undefined);
  return u !== undefined && u > 0 ? `${text} % (u ${formatU(100 * u)} %)` : `${text} %`;
}

/** A target or limit as its author wrote it, in per cent: `98 %`. */
export function formatTarget(share: number): string {
  return `${minus(String(Number((100 * share).toPrecision(12))))} %`;
}

/** A number without an uncertainty, to a count of significant figures. */
export function significant(value: number, figures: number): string {
  if (!Number.isFinite(value)) return 'not determined';
  if (value === 0) return '0';
  const size = Math.floor(Math.log10(Math.abs(value)));
  if (size >= figures + 3 || size < -4) return minus(value.toExponential(figures - 1));
  return minus(value.toFixed(Math.max(0, figures - 1 - size)));
}

/** Seconds as hours and minutes: `7 h 05 min`. */
export function formatElapsed(seconds: number): string {
  const sign = seconds < 0 ? '\u2212' : '';
  const minutes = Math.round(Math.abs(seconds) / 60);
  return minutes < 60
    ? `${sign}${minutes} min`
    : `${sign}${Math.floor(minutes / 60)} h ${String(minutes % 60).padStart(2, '0')} min`;
}

/** `2026-03-14 19:31:00 UTC` */
export function formatTime(iso: string): string {
  return `${iso.slice(0, 10)} ${iso.slice(11, 19)} UTC`;
}

function decimalsOf(u: number): number {
  return Math.min(12, Math.max(0, 1 - Math.floor(Math.log10(u))));
}

/** A true minus sign, so that it lines up and reads well. */
function minus(text: string): string {
  return text.replace(/^-/, '\u2212');
}

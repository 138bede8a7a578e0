/** Numbers for people: fixed places so that they do not jump; a dash where there is none. */
export const fixed = (value: number | null | undefined, places: number): string => {
  if (value === null || value === undefined || !Number.isFinite(value)) return '–';
  const text = value.toFixed(places);
  return text.replace('-', Number(text) === 0 ? '' : '−');
};

export const metres = (value: number | null | undefined): string => `${fixed(value, 2)} m`;
export const kilopascals = (value: number | null | undefined): string =>
  `${fixed(value == null ? value : value / 1000, 1)} kPa`;
export const newtons = (value: number | null | undefined): string =>
  `${fixed(value, value != null && Math.abs(value) < 10 ? 1 : 0)} N`;

/** Seconds as h:mm:ss. */
export const clockTime = (seconds: number): string => {
  const whole = Math.max(0, Math.floor(seconds));
  const two = (n: number) => String(n).padStart(2, '0');
  return `${Math.floor(whole / 3600)}:${two(Math.floor(whole / 60) % 60)}:${two(whole % 60)}`;
};

export const megabytes = (bytes: number): string => `${(bytes / 1e6).toFixed(1)} MB`;

/** A signal's value in the unit people read it in. */
export const inUnit = (value: number, unit: string): string => {
  if (unit === 'kPa') return `${fixed(value / 1000, 2)} kPa`;
  if (unit === 'deg') return `${fixed((value * 180) / Math.PI, 1)}°`;
  if (unit === 'm') return `${fixed(value, 3)} m`;
  if (unit === 'N') return `${fixed(value, 1)} N`;
  return `${fixed(value, Number.isInteger(value) ? 0 : 3)} ${unit}`.trim();
};

/** Local date and time, the same in every country: 2026-03-31 14:05:09. */
export const dateAndTime = (time: string): string => {
  const at = new Date(time);
  const two = (n: number) => String(n).padStart(2, '0');
  const date = [at.getFullYear(), two(at.getMonth() + 1), two(at.getDate())].join('-');
  return `${date} ${[at.getHours(), at.getMinutes(), at.getSeconds()].map(two).join(':')}`;
};

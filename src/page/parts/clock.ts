// Time as the clock on the wall shows it; a log that is read at the roof says the hour of the roof.

const two = (n: number) => String(n).padStart(2, "0");

/** Now, by the local clock, with how far that is from UTC: 2026-03-04T15:16:17+01:00. */
export function writeTime(now = new Date()): string {
  const ahead = -now.getTimezoneOffset();
  const zone = `${ahead < 0 ? "-" : "+"}${two(Math.floor(Math.abs(ahead) / 60))}:${two(Math.abs(ahead) % 60)}`;
  const day = `${now.getFullYear()}-${two(now.getMonth() + 1)}-${two(now.getDate())}`;
  return `${day}T${two(now.getHours())}:${two(now.getMinutes())}:${two(now.getSeconds())}${zone}`;
}

/** Day and minute of a time as it was written; one told in UTC by the local clock. */
export function showTime(time: string): string {
  const local = /Z$/.test(time) && Number.isFinite(Date.parse(time)) ? writeTime(new Date(time)) : time;
  return local.replace("T", " ").slice(0, 16);
}

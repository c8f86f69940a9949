const MONTHS = ["Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec"];

/** `9 Jun 2031, 14:05 UTC`; with seconds where `seconds` is set. Takes RFC 3339. */
export function formatTime(time: string, options: { seconds?: boolean } = {}): string {
  const at = new Date(time);
  if (Number.isNaN(at.getTime())) return time;
  const clock = [
    at.getUTCHours(),
    at.getUTCMinutes(),
    ...(options.seconds ? [at.getUTCSeconds()] : []),
  ];
  return `${formatDate(time)}, ${clock.map(twoDigits).join(":")} UTC`;
}

/** `9 Jun 2031`, the date in UTC. */
export function formatDate(time: string): string {
  const at = new Date(time);
  if (Number.isNaN(at.getTime())) return time;
  return `${at.getUTCDate()} ${MONTHS[at.getUTCMonth()]} ${at.getUTCFullYear()}`;
}

/** `21 d`, `3 h`, `40 s`: the largest unit that leaves a whole number of at least one. */
export function formatDuration(durationMs: number): string {
  const seconds = Math.floor(Math.abs(durationMs) / 1000);
  if (seconds < 60) return `${seconds}\u00a0s`;
  if (seconds < 3600) return `${Math.floor(seconds / 60)}\u00a0min`;
  if (seconds < 86_400) return `${Math.floor(seconds / 3600)}\u00a0h`;
  return `${Math.floor(seconds / 86_400)}\u00a0d`;
}

/** `1 Mar to 1 Apr 2031`; an end that is missing is open. */
export function formatWindow(from: string | null, to: string | null): string {
  if (from === null && to === null) return "any time";
  if (from === null) return `until ${formatDate(to ?? "")}`;
  if (to === null) return `from ${formatDate(from)}`;
  const [first, last] = [formatDate(from), formatDate(to)];
  if (first === last) return first;
  const year = ` ${new Date(to).getUTCFullYear()}`;
  return `${first.endsWith(year) ? first.slice(0, -year.length) : first} to ${last}`;
}

function twoDigits(part: number): string {
  return String(part).padStart(2, "0");
}

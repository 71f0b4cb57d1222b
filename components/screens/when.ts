const months = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec'];
const two = (n: number) => String(n).padStart(2, '0');

/** "12:04". */
export function clockTime(atMs: number): string {
  const at = new Date(atMs);
  return `${two(at.getHours())}:${two(at.getMinutes())}`;
}

/** "4 min ago", "today 09:41", "yesterday 17:20", "27 Nov 2026": in the reader's own time zone. */
export function when(atMs: number, nowMs: number = Date.now()): string {
  const at = new Date(atMs);
  const now = new Date(nowMs);
  const minutes = Math.floor((nowMs - atMs) / 60_000);
  if (minutes >= 0 && minutes < 1) return 'just now';
  if (minutes >= 0 && minutes < 60) return `${minutes} min ago`;
  const midnight = (day: Date) => new Date(day.getFullYear(), day.getMonth(), day.getDate()).getTime();
  const days = Math.round((midnight(now) - midnight(at)) / 86_400_000);
  if (days === 0) return `today ${clockTime(atMs)}`;
  if (days === 1) return `yesterday ${clockTime(atMs)}`;
  return `${at.getDate()} ${months[at.getMonth()]} ${at.getFullYear()}`;
}

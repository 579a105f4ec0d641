/** Dates and times in words, in the person's own time zone. */

const TIME: Intl.DateTimeFormatOptions = { hour: "2-digit", minute: "2-digit", hour12: false };

/** "12:04" */
export function clockTime(iso: string): string {
  return new Date(iso).toLocaleTimeString("en-GB", TIME);
}

/** "21 March 2026, 16:00" */
export function dateTime(iso: string): string {
  const at = new Date(iso);
  const day = at.toLocaleDateString("en-GB", { day: "numeric", month: "long", year: "numeric" });
  return `${day}, ${clockTime(iso)}`;
}

/** "4 days", "3 hours", "less than an hour": how long something has waited. */
export function waitingTime(since: string, now: Date = new Date()): string {
  const hours = Math.floor((now.getTime() - new Date(since).getTime()) / 3_600_000);
  if (hours < 1) return "less than an hour";
  if (hours < 48) return hours === 1 ? "1 hour" : `${hours} hours`;
  return `${Math.floor(hours / 24)} days`;
}

/** "March 2026" */
export function monthYear(iso: string): string {
  return new Date(iso).toLocaleDateString("en-GB", { month: "long", year: "numeric" });
}

/** "71 hours", "1 hour", "less than an hour": until a claim ends, which is never long. */
export function timeLeft(until: string, now: Date = new Date()): string {
  const hours = Math.floor((new Date(until).getTime() - now.getTime()) / 3_600_000);
  if (hours < 1) return "less than an hour";
  return hours === 1 ? "1 hour" : `${hours} hours`;
}

/** "21 March 2026" */
export function longDay(iso: string): string {
  return new Date(iso).toLocaleDateString("en-GB", {
    day: "numeric",
    month: "long",
    year: "numeric",
  });
}

const DAY_MS = 86_400_000;

/** Whole days until a time; negative when it is past. */
export function daysUntil(iso: string, now: Date = new Date()): number {
  return Math.floor((new Date(iso).getTime() - now.getTime()) / DAY_MS);
}

/** The time so many days from now. */
export function inDays(days: number, now: Date = new Date()): string {
  return new Date(now.getTime() + days * DAY_MS).toISOString();
}

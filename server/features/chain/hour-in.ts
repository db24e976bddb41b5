/** The hour of a moment in a time zone, 0 to 23. */
export function hourIn(timeZone: string, now: Date): number {
  return Number(new Intl.DateTimeFormat("en-GB", { timeZone, hour: "2-digit", hourCycle: "h23" }).format(now));
}

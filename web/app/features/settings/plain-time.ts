const FORMAT = new Intl.DateTimeFormat('en-GB', { dateStyle: 'medium', timeStyle: 'short' });

/** "4 May 2026, 14:20" in the zone of this device; for what belongs to no studio. */
export function plainTime(instant: string): string {
  return FORMAT.format(new Date(instant));
}

/** Minutes after midnight as the value of a time field: 1320 → "22:00"; '' for none. */
export function clockOfMinutes(minutes: number | null): string {
  if (minutes === null) return '';
  return `${String(Math.floor(minutes / 60)).padStart(2, '0')}:${String(minutes % 60).padStart(2, '0')}`;
}

/** The value of a time field as minutes after midnight; null for an empty one. Worked value: "22:00" → 1320. */
export function minutesOfClock(value: string): number | null {
  const match = /^(\d{1,2}):(\d{2})$/.exec(value);
  return match ? Number(match[1]) * 60 + Number(match[2]) : null;
}

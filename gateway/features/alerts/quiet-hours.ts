import { DateTime } from 'luxon';

/** Quiet hours of a studio: minutes after local midnight, both null for none; may run over midnight. */
export interface QuietHours {
  readonly timeZone: string;
  readonly from: number | null;
  readonly to: number | null;
}

/** When the quiet hours that contain an instant end, epoch ms; null when it is not quiet. */
export function quietUntil(at: number, { timeZone, from, to }: QuietHours): number | null {
  if (from === null || to === null || from === to) return null;
  const local = DateTime.fromMillis(at, { zone: timeZone });
  const minute = local.hour * 60 + local.minute;
  const overMidnight = from > to;
  const quiet = overMidnight ? minute >= from || minute < to : minute >= from && minute < to;
  if (!quiet) return null;
  const endsTomorrow = overMidnight && minute >= from;
  return local
    .startOf('day')
    .plus({ days: endsTomorrow ? 1 : 0 })
    .set({ hour: Math.floor(to / 60), minute: to % 60 })
    .toMillis();
}

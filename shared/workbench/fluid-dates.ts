/** Weeks after which a date says nothing any more: other reasons than heat change a fluid before ten years are over. */
const MOST_WEEKS = 520

/** When heat alone would have used the fluid up, as a span between two wordings of the rule. */
export interface FluidDates {
  /** Days from today; null where it is further off than ten years. */
  fromDays: number | null
  toDays: number | null
}

/**
 * Turns drive cycles to a change into days, for somebody who drives this cycle so many times a week.
 * @param cycles - fewest and most cycles to a change
 * @param timesAWeek - over 0
 */
export function fluidDates(cycles: { fewest: number; most: number }, timesAWeek: number): FluidDates {
  const days = (count: number) => {
    const weeks = count / timesAWeek
    return weeks > MOST_WEEKS ? null : Math.floor(weeks * 7)
  }
  return { fromDays: days(cycles.fewest), toDays: days(cycles.most) }
}

const DAY_FORMAT = new Intl.DateTimeFormat('en-US', {
  year: 'numeric',
  month: 'short',
  day: 'numeric',
  timeZone: 'UTC',
})

/** A day so many days on from another, as people write it: "Mar 4, 2027". */
export function formatDay(today: Date, days: number): string {
  return DAY_FORMAT.format(new Date(today.getTime() + days * 86_400_000))
}

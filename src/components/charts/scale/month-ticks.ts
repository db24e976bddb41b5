const monthNames = ["Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec"];
/** Days before each month of a year without a leap day. */
const daysBefore = [0, 31, 59, 90, 120, 151, 181, 212, 243, 273, 304, 334];

export type LabelledTick = { value: number; label: string };

/** First days of months on the year's circle from 0 to 1, every so many months: January, April, July, October. */
export const monthTicks = (every = 3): LabelledTick[] =>
  monthNames
    .map((label, month) => ({ value: daysBefore[month] / 365, label }))
    .filter((_, month) => month % every === 0);

/**
 * Easter Sunday in the Gregorian calendar, as a day written 2026-04-05, by the anonymous algorithm of 1876
 * (as in Meeus, Astronomical Algorithms, 2nd ed. 1998, ch. 8).
 *
 * @example easterSunday(2026) // "2026-04-05"
 */
export function easterSunday(year: number): string {
  const golden = year % 19;
  const century = Math.floor(year / 100);
  const yearOfCentury = year % 100;
  const moonCorrection = Math.floor((century - Math.floor((century + 8) / 25) + 1) / 3);
  const epact = (19 * golden + century - Math.floor(century / 4) - moonCorrection + 15) % 30;
  const leapSteps = 2 * (century % 4) + 2 * Math.floor(yearOfCentury / 4) - (yearOfCentury % 4);
  const weekday = (32 + leapSteps - epact) % 7;
  const late = Math.floor((golden + 11 * epact + 22 * weekday) / 451);
  const sum = epact + weekday - 7 * late + 114;
  const month = Math.floor(sum / 31);
  return `${year}-${String(month).padStart(2, "0")}-${String((sum % 31) + 1).padStart(2, "0")}`;
}

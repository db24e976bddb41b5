import { weekdayNames } from "@shared/calendar";
import type { ComboboxOption } from "@/components/ui/combobox-options";
import { capitalised } from "@/lib/format/capitalised";

const languageTags = (
  "bg-BG cs-CZ da-DK de-AT de-CH de-DE el-GR en-AU en-CA en-GB en-IE en-IN en-NZ en-US en-ZA es-ES es-MX et-EE fi-FI fr-BE fr-CA " +
  "fr-CH fr-FR hr-HR hu-HU it-CH it-IT ja-JP ko-KR lt-LT lv-LV nb-NO nl-BE nl-NL pl-PL pt-BR pt-PT ro-RO sk-SK sl-SI sv-SE tr-TR uk-UA"
).split(" ");

/** Every option there is, and the value in use should it be none of them. */
const withValue = (options: ComboboxOption[], value: string): ComboboxOption[] =>
  options.some((option) => option.value === value) ? options : [{ value, label: value }, ...options];

const byLabel = (one: ComboboxOption, other: ComboboxOption) => one.label.localeCompare(other.label, "en");

/** Currencies by name, with their three letters. */
export const currencyOptions = (value: string): ComboboxOption[] => {
  const names = new Intl.DisplayNames("en", { type: "currency" });
  const options = Intl.supportedValuesOf("currency").map((code) => ({ value: code, label: names.of(code) ?? code, detail: code }));
  return withValue(options.sort(byLabel), value);
};

/** Languages with their country, as numbers and dates are written there. */
export const localeOptions = (value: string): ComboboxOption[] => {
  const names = new Intl.DisplayNames("en", { type: "language", languageDisplay: "standard" });
  const options = languageTags.map((tag) => ({ value: tag, label: names.of(tag) ?? tag, detail: tag }));
  return withValue(options.sort(byLabel), value);
};

export const timeZoneOptions = (value: string): ComboboxOption[] =>
  withValue(Intl.supportedValuesOf("timeZone").map((zone) => ({ value: zone, label: zone.replaceAll("_", " ") })), value);

/** Days of the week by their number, Monday first. */
export const weekdayChoices = [1, 2, 3, 4, 5, 6, 0].map((day) => ({ value: String(day), label: capitalised(weekdayNames[day] ?? "") }));

export const hourChoices = Array.from({ length: 24 }, (_, hour) => ({ value: String(hour), label: `${String(hour).padStart(2, "0")}:00` }));

/** How a locale writes a number, an amount and a day; empty where it is none. */
export const localeExample = (locale: string, currency: string): string => {
  try {
    const amount = new Intl.NumberFormat(locale, { style: "currency", currency }).format(1234.5);
    const day = new Intl.DateTimeFormat(locale, { dateStyle: "medium", timeZone: "UTC" }).format(Date.UTC(2026, 5, 8));
    return `${amount} on ${day}`;
  } catch {
    return "";
  }
};

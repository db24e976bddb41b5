export type ComboboxOption = {
  value: string;
  label: string;
  /** Said in grey after the label, and searched too. */ detail?: string;
};

const plain = (text: string) => text.normalize("NFD").replace(/\p{M}/gu, "").toLowerCase();

/** More than this many at once helps nobody choose. */
export const mostOptionsShown = 200;

/** Options that hold every word typed, accents and case aside; those that begin with the text come first. */
export const matchOptions = (options: readonly ComboboxOption[], text: string): ComboboxOption[] => {
  const words = plain(text).split(/\s+/).filter(Boolean);
  if (words.length === 0) return [...options];
  const start = plain(text.trim());
  const matching = options.filter((option) => {
    const whole = plain(`${option.label} ${option.detail ?? ""} ${option.value}`);
    return words.every((word) => whole.includes(word));
  });
  const beginsWithText = (option: ComboboxOption) => plain(option.label).startsWith(start);
  return [...matching.filter(beginsWithText), ...matching.filter((option) => !beginsWithText(option))];
};

/** Whether one of some texts holds each word that was typed, in any case. */
export const holdsWords = (typed: string, texts: readonly (string | null)[]): boolean => {
  const all = texts.filter((text) => text !== null).join(" ").toLowerCase();
  return typed.toLowerCase().split(/\s+/).every((word) => all.includes(word));
};

const longestName = 200;

/** Control characters, and the marks that reverse the direction of text and so can hide a file's real ending. */
const hidden = /[\p{Cc}\u200e\u200f\u202a-\u202e\u2066-\u2069]/gu;

/**
 * A file name as we keep and show it: the last part of a path, without control characters, at most 200 characters.
 *
 * @example cleanFileName("..\\..\\week 24.csv") // "week 24.csv"
 */
export function cleanFileName(given: string): string {
  const last = given.split(/[/\\]/).at(-1) ?? "";
  const name = last.replace(hidden, "").normalize("NFC").trim().replace(/^\.+/, "");
  if (name === "") return "unnamed.csv";
  const characters = Array.from(name);
  if (characters.length <= longestName) return name;
  const ending = Array.from(/(\.[a-z0-9]{1,8}){1,2}$/i.exec(name)?.[0] ?? "");
  return [...characters.slice(0, longestName - ending.length), ...ending].join("");
}

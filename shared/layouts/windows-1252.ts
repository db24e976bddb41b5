/** Characters of the bytes 0x80 to 0x9F; the other bytes are those of Unicode's first 256. The five unused ones stay what they are. */
const upperControls =
  "\u20ac\u0081\u201a\u0192\u201e\u2026\u2020\u2021\u02c6\u2030\u0160\u2039\u0152\u008d\u017d\u008f" +
  "\u0090\u2018\u2019\u201c\u201d\u2022\u2013\u2014\u02dc\u2122\u0161\u203a\u0153\u009d\u017e\u0178";
const chunkLength = 8192;

/**
 * Text of Windows-1252 bytes, by our own table: runtimes differ in the bytes 0x80 to 0x9F, where the euro sign is.
 *
 * @example decodeWindows1252(Uint8Array.of(0x80, 0x35)) // "€5"
 */
export function decodeWindows1252(bytes: Uint8Array): string {
  let text = "";
  for (let start = 0; start < bytes.length; start += chunkLength) {
    text += String.fromCharCode(...bytes.subarray(start, start + chunkLength));
  }
  return text.replace(/[\u0080-\u009f]/g, (control) => upperControls[control.charCodeAt(0) - 0x80] ?? control);
}

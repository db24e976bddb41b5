import type { Encoding } from "../contract/layouts";
import { headBytes, type Detected } from "./detected";
import { decodeWindows1252 } from "./windows-1252";

const found = (value: Encoding, confidence: number): Detected<Encoding> => ({ value, confidence, warnings: [] });

/**
 * The encoding of a file, by its first 64 KiB: a byte order mark, else where its NUL bytes stand, else whether it is valid
 * UTF-8 (RFC 3629), else Windows-1252, in which nearly every sequence of bytes is some text.
 *
 * @example detectEncoding(new TextEncoder().encode("week;store")).value // "utf-8"
 */
export function detectEncoding(head: Uint8Array): Detected<Encoding> {
  const bytes = head.subarray(0, headBytes);
  if (startsWith(bytes, [0xef, 0xbb, 0xbf])) return found("utf-8", 1);
  if (startsWith(bytes, [0xff, 0xfe])) return found("utf-16le", 1);
  if (startsWith(bytes, [0xfe, 0xff])) return found("utf-16be", 1);
  const wide = byNulBytes(bytes);
  if (wide) return found(wide, 0.95);
  if (decodeUtf8(bytes) !== null) return found("utf-8", isAscii(bytes) ? 1 : 0.99);
  const message = "The file is neither UTF-8 nor UTF-16; it is read as Windows-1252. Look whether accents and the euro sign are right.";
  return { value: "windows-1252", confidence: hasUnusedBytes(bytes) ? 0.4 : 0.8, warnings: [{ code: "encoding-guessed", message }] };
}

/**
 * Text of a file's first 64 KiB, without a byte order mark; what is cut at the end is left out.
 *
 * @returns null where the bytes are none of that encoding.
 */
export function decodeHead(head: Uint8Array, encoding: Encoding): string | null {
  const bytes = head.subarray(0, headBytes);
  const text = decode(bytes, encoding);
  return text?.startsWith("\ufeff") ? text.slice(1) : text;
}

/** Whether a text reads the same as UTF-8 and as Windows-1252. */
export function isAscii(bytes: Uint8Array): boolean {
  return bytes.every((byte) => byte < 0x80);
}

function decode(bytes: Uint8Array, encoding: Encoding): string | null {
  if (encoding === "utf-8") return decodeUtf8(bytes);
  if (encoding === "windows-1252") return decodeWindows1252(bytes);
  return decodeUtf16(bytes, encoding === "utf-16le");
}

function decodeUtf8(bytes: Uint8Array): string | null {
  const decoder = new TextDecoder("utf-8", { fatal: true, ignoreBOM: true });
  try {
    // A character that is cut at the end is waited for, not refused.
    return decoder.decode(bytes, { stream: true });
  } catch {
    return null;
  }
}

function decodeUtf16(bytes: Uint8Array, isLittle: boolean): string {
  const [low, high] = isLittle ? [0, 1] : [1, 0];
  const units: string[] = [];
  for (let at = 0; at + 1 < bytes.length; at += 2) {
    units.push(String.fromCharCode((bytes[at + low] ?? 0) | ((bytes[at + high] ?? 0) << 8)));
  }
  return units.join("");
}

/** Digits, separators and line ends have a NUL in every script: first in big-endian UTF-16, second in little-endian. */
function byNulBytes(bytes: Uint8Array): "utf-16le" | "utf-16be" | null {
  const nuls = [0, 0];
  for (let at = 0; at < bytes.length; at++) if (bytes[at] === 0) nuls[at % 2]++;
  const [first = 0, second = 0] = nuls;
  const enough = bytes.length / 20;
  if (second > enough && second > 8 * first) return "utf-16le";
  return first > enough && first > 8 * second ? "utf-16be" : null;
}

const startsWith = (bytes: Uint8Array, mark: number[]) => mark.every((byte, at) => bytes[at] === byte);

const unused = new Set([0x81, 0x8d, 0x8f, 0x90, 0x9d]);
const hasUnusedBytes = (bytes: Uint8Array) => bytes.some((byte) => unused.has(byte));

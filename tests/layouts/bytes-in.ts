import { decodeWindows1252 } from "@shared/layouts";
import type { Encoding } from "@shared/contract/layouts";

const windows1252 = new Map(Array.from({ length: 256 }, (_, byte) => [decodeWindows1252(Uint8Array.of(byte)), byte]));

/** Bytes of a text as a file has them. */
export function bytesIn(encoding: Encoding, text: string, { mark = false }: { mark?: boolean } = {}): Uint8Array {
  const whole = mark ? `\ufeff${text}` : text;
  if (encoding === "utf-8") return new TextEncoder().encode(whole);
  if (encoding === "windows-1252") {
    return Uint8Array.from([...text], (character) => {
      const byte = windows1252.get(character);
      if (byte === undefined) throw new Error(`Windows-1252 has no ${character}.`);
      return byte;
    });
  }
  const bytes = new Uint8Array(2 * whole.length);
  const view = new DataView(bytes.buffer);
  for (let at = 0; at < whole.length; at++) view.setUint16(2 * at, whole.charCodeAt(at), encoding === "utf-16le");
  return bytes;
}

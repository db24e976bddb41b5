import { isIPv6 } from "node:net";

/**
 * What throttling counts by: an IPv4 address, or the first 64 bits of an IPv6 address, since one customer of a network
 * is given at least that many and could take a new address for every try.
 *
 * @example networkOf("2001:db8::1") // "2001:db8:0:0::/64"
 */
export function networkOf(address: string): string {
  const mapped = /^::ffff:(\d+\.\d+\.\d+\.\d+)$/i.exec(address)?.[1];
  if (mapped) return mapped;
  const plain = address.split("%")[0] ?? address;
  if (!isIPv6(plain)) return address;
  const [head = "", tail] = plain.toLowerCase().split("::");
  const first = head === "" ? [] : head.split(":");
  const last = tail === undefined || tail === "" ? [] : tail.split(":");
  const zeros =
    tail === undefined ? [] : Array.from({ length: Math.max(0, 8 - first.length - last.length) }, () => "0");
  const groups = [...first, ...zeros, ...last].map((group) => group.replace(/^0+(?=.)/, ""));
  return `${groups.slice(0, 4).join(":")}::/64`;
}

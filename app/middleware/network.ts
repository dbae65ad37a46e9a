import { isIP } from "node:net";

/**
 * The network an address is counted under: all of a household's IPv6 addresses share their first 64 bits (RFC 4291,
 * section 2.5.1), and an IPv4 address stands for itself or, with `ipv4Bits: 24`, for its neighbourhood.
 * IPv4 in IPv6 clothes (`::ffff:192.0.2.7`) is IPv4. Whatever is no address is its own network.
 */
export function networkOf(address: string, ipv4Bits: 24 | 32 = 32): string {
  const bare = address.replace(/%.*$/, "").toLowerCase();
  const dressed = /^::ffff:(\d+\.\d+\.\d+\.\d+)$/.exec(bare);
  const ipv4 = dressed?.[1] ?? bare;
  if (isIP(ipv4) === 4) {
    return ipv4Bits === 32 ? ipv4 : `${ipv4.split(".").slice(0, 3).join(".")}.0/24`;
  }
  if (isIP(bare) !== 6) return bare;
  return `${firstGroups(bare).join(":")}::/64`;
}

/** The first four groups of an IPv6 address, each written without leading zeros. */
function firstGroups(address: string): string[] {
  const [head = "", tail] = address.split("::");
  const groups = (part: string | undefined) => (part ? part.split(":") : []);
  const [before, after] = [groups(head), groups(tail)];
  // An embedded IPv4 address takes two groups; it stands in the last 32 bits, so it is never among the first four.
  const length = before.length + after.length + (after.at(-1)?.includes(".") ? 1 : 0);
  const all = tail === undefined ? before : [...before, ...Array(8 - length).fill("0"), ...after];
  return all.slice(0, 4).map((group) => Number.parseInt(group, 16).toString(16));
}

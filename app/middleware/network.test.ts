import { describe, expect, it } from "vitest";
import { networkOf } from "./network";

describe("networkOf", () => {
  it("counts an IPv4 address by itself or by its neighbourhood", () => {
    expect(networkOf("192.0.2.7")).toBe("192.0.2.7");
    expect(networkOf("192.0.2.7", 24)).toBe("192.0.2.0/24");
    expect(networkOf("::ffff:192.0.2.7", 24)).toBe("192.0.2.0/24");
  });

  it("counts IPv6 addresses by their first 64 bits, however they are written", () => {
    const network = networkOf("2001:db8:0:7::1");
    expect(network).toBe("2001:db8:0:7::/64");
    expect(networkOf("2001:0DB8:0000:0007:aaaa:bbbb:cccc:dddd")).toBe(network);
    expect(networkOf("2001:db8:0:7:0:0:192.0.2.7")).toBe(network);
    expect(networkOf("2001:db8::8")).not.toBe(network);
    expect(networkOf("::1")).toBe("0:0:0:0::/64");
    expect(networkOf("fe80::1%eth0")).toBe("fe80:0:0:0::/64");
  });

  it("lets what is no address stand for itself", () => {
    expect(networkOf("unknown")).toBe("unknown");
  });
});

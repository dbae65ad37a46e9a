import net from "node:net";
import { expect, test } from "vitest";
import { assertPortsFree, derivePorts, freePorts, PORT_NAMES } from "./ports.mjs";

test("the six ports are counted from PORT, and each may be set apart", () => {
  expect(derivePorts({})).toEqual({
    PORT: 3000,
    STORAGE_PORT: 3001,
    STRIPE_PORT: 3002,
    MAIL_PORT: 3003,
    SMTP_PORT: 3004,
    POSTGRES_PORT: 3005,
  });
  expect(derivePorts({ PORT: "4100", MAIL_PORT: "9000", SMTP_PORT: "" })).toMatchObject({
    STORAGE_PORT: 4101,
    MAIL_PORT: 9000,
    SMTP_PORT: 4104,
    POSTGRES_PORT: 4105,
  });
});

test.each([
  [{ PORT: "eighty" }, 'PORT is "eighty"'],
  [{ PORT: "3000.5" }, 'PORT is "3000.5"'],
  [{ PORT: "0" }, "PORT would be 0"],
  [{ PORT: "65533" }, "MAIL_PORT would be 65536"],
  [{ STRIPE_PORT: "3004" }, "STRIPE_PORT and SMTP_PORT are both 3004"],
])("%j is refused in words", (environment, message) => {
  expect(() => derivePorts(environment)).toThrow(message);
});

test("a taken port is named, with the variable that moves it", async () => {
  const server = net.createServer();
  await new Promise<void>((resolve) => server.listen(0, "127.0.0.1", resolve));
  const address = server.address();
  const port = typeof address === "object" && address !== null ? address.port : 0;
  const wanted = [{ name: "SMTP_PORT" as const, port, host: "127.0.0.1" }];
  await expect(assertPortsFree(wanted)).rejects.toThrow(
    `Port ${port} (SMTP_PORT) is taken by another program.`,
  );
  await new Promise((resolve) => server.close(resolve));
  await expect(assertPortsFree(wanted)).resolves.toBeUndefined();
});

test("an address that is not this machine's is named", async () => {
  // 192.0.2.0/24 is set aside for documentation (RFC 5737), so no machine has it.
  await expect(assertPortsFree([{ name: "PORT", port: 3000, host: "192.0.2.1" }])).rejects.toThrow(
    "This machine has no address 192.0.2.1 (HOST).",
  );
});

test("free ports are six in a row", async () => {
  const ports = await freePorts();
  const first = Number(ports.PORT);
  expect(PORT_NAMES.map((name) => Number(ports[name]) - first)).toEqual([0, 1, 2, 3, 4, 5]);
});

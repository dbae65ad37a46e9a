import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { CAPABILITIES, type Capability, can, capabilitiesOf, isRole, ROLES, type Role } from "./permissions";

const refusedTo = (role: Role, capabilities: readonly Capability[]) =>
  capabilities.filter((capability) => can([role], capability));

describe("permissions", () => {
  it("give the photographer everything", () => {
    expect(capabilitiesOf(["photographer"])).toEqual([...CAPABILITIES]);
  });

  it("give a visitor nothing", () => {
    expect(capabilitiesOf([])).toEqual([]);
  });

  it("keep settings, people, refunds and prices from the assistant", () => {
    expect(
      refusedTo("assistant", [
        "settings.see",
        "settings.change",
        "people.see",
        "people.change",
        "refunds.see",
        "refunds.make",
        "orders.cancel",
        "reductions.make",
        "prices.change",
        "editions.open",
        "editions.change",
      ]),
    ).toEqual([]);
    expect(
      (
        [
          "rolls.change",
          "prints.change",
          "printroom.work",
          "orders.see",
          "orders.make",
          "orders.send",
        ] as const
      ).every((capability) => can(["assistant"], capability)),
    ).toBe(true);
  });

  it("let the bookkeeper read and export, and change nothing but their own account", () => {
    expect(capabilitiesOf(["bookkeeper"])).toEqual([
      "studio.see",
      "orders.see",
      "refunds.see",
      "invoices.see",
      "tax.see",
      "figures.see",
      "figures.export",
      "account.own",
    ]);
  });

  it("keep printers, stockists and collectors to their own", () => {
    expect(capabilitiesOf(["printer"])).toEqual(["printjobs.own", "account.own"]);
    expect(capabilitiesOf(["stockist"])).toEqual(["consignments.own", "account.own"]);
    expect(capabilitiesOf(["collector"])).toEqual([
      "orders.own",
      "certificates.own",
      "copies.pass_on",
      "account.own",
    ]);
  });

  it("add up over several roles and never take away", () => {
    const anyRoles = fc.subarray([...ROLES]);
    fc.assert(
      fc.property(anyRoles, anyRoles, fc.constantFrom(...CAPABILITIES), (some, others, capability) => {
        expect(can([...some, ...others], capability)).toBe(can(some, capability) || can(others, capability));
      }),
    );
  });

  it("know a role from another word", () => {
    expect(isRole("printer")).toBe(true);
    expect(isRole("owner")).toBe(false);
  });
});

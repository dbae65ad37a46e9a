import type { RouteConfigEntry } from "@react-router/dev/routes";
import { describe, expect, it } from "vitest";
import routes from "~/routes";
import { ROLES } from "./permissions";
import { accessTo, allows, ROUTE_PERMISSIONS } from "./route-permissions";

function patternsOf(entries: RouteConfigEntry[], parent = ""): string[] {
  return entries.flatMap((entry) => {
    const pattern = entry.path === undefined ? parent : `${parent}/${entry.path}`;
    return entry.children === undefined ? [pattern] : patternsOf(entry.children, pattern);
  });
}

describe("the table of routes", () => {
  it("has one row for every route, and none for anything else", () => {
    const patterns = ROUTE_PERMISSIONS.map((row) => row.pattern);
    expect([...patterns].sort()).toEqual(patternsOf(routes).sort());
    expect(new Set(patterns).size).toBe(patterns.length);
  });

  it("refuses what it does not name", () => {
    for (const method of ["GET", "HEAD", "POST", "DELETE"]) {
      expect(accessTo("/studio/secret", method)).toBe("nobody");
    }
    expect(allows("nobody", [...ROLES])).toBe(false);
  });

  it("lets no visitor, printer, stockist or collector see or change anything in the studio", () => {
    const studio = ROUTE_PERMISSIONS.filter((row) => row.pattern.startsWith("/studio"));
    expect(studio.length).toBeGreaterThan(20);
    for (const row of studio) {
      for (const roles of [[], ["printer"], ["stockist"], ["collector"]] as const) {
        expect([row.pattern, allows(row.see, roles), allows(row.change, roles)]).toEqual([
          row.pattern,
          false,
          false,
        ]);
      }
    }
  });

  it("lets the bookkeeper change nothing and the assistant reach neither settings nor people", () => {
    for (const row of ROUTE_PERMISSIONS.filter((r) => r.pattern.startsWith("/studio"))) {
      expect([row.pattern, allows(row.change, ["bookkeeper"])]).toEqual([row.pattern, false]);
    }
    for (const pattern of ["/studio/settings", "/studio/people", "/studio/people/:partyId"]) {
      expect(allows(accessTo(pattern, "GET"), ["assistant"])).toBe(false);
    }
  });
});

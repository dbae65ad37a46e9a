import { describe, expect, it } from "vitest";
import { type Asking, accessToOrder } from "./buyer-access";

const order = {
  id: "order",
  accountId: null,
  buyerPartyId: "party",
  email: "Maud@Post.example",
  deliveryAddress: { postcode: "AB1 2CD" },
};
const nobody: Asking = { made: [], opened: [], visitor: null };
const visitor = { accountId: "account", partyId: "other", email: "maud@post.example", emailVerified: true };

describe("accessToOrder", () => {
  it("gives a stranger with the link nothing personal", () => {
    expect(accessToOrder(order, nobody)).toBe("link");
    expect(accessToOrder(order, { ...nobody, made: ["another"], opened: ["another"] })).toBe("link");
  });

  it("lets the browser that paid see and correct, and the one that knew the postcode see", () => {
    expect(accessToOrder(order, { ...nobody, made: ["order"] })).toBe("paid");
    expect(accessToOrder(order, { ...nobody, opened: ["order"] })).toBe("details");
  });

  it("lets the account that ordered see it, confirmed or not", () => {
    const own = { ...order, accountId: "account", email: "else@post.example" };
    expect(accessToOrder(own, { ...nobody, visitor: { ...visitor, emailVerified: false } })).toBe("details");
  });

  it("believes an e-mail address or a party only of a confirmed account", () => {
    expect(accessToOrder(order, { ...nobody, visitor })).toBe("details");
    expect(accessToOrder(order, { ...nobody, visitor: { ...visitor, emailVerified: false } })).toBe("link");
    const party = { ...visitor, email: "else@post.example", partyId: "party" };
    expect(accessToOrder(order, { ...nobody, visitor: party })).toBe("details");
    expect(accessToOrder(order, { ...nobody, visitor: { ...party, emailVerified: false } })).toBe("link");
  });

  it("does not take two orders without an address for the same buyer's", () => {
    const unaddressed = { ...order, email: null };
    expect(accessToOrder(unaddressed, { ...nobody, visitor: { ...visitor, email: "" } })).toBe("link");
  });
});

import { newBuyer } from "../support/buy";
import { expect, look, test } from "../support/e2e";
import { demoLogin } from "../support/login";
import { linkIn, mailsTo, readMail } from "../support/read-mail";

/* Accounts as people use them, with the letters they are sent. */

const PASSWORD = "a lantern on the lower quay";
const NEXT_PASSWORD = "two lanterns on the quay";

test("somebody makes an account, confirms it, forgets the password and chooses another", async ({
  visit,
}) => {
  const { name, email } = newBuyer("Cordelia Wick");
  const page = await visit();
  await page.goto("/sign-up");
  await page.getByLabel("Your name").fill(name);
  await page.getByLabel("E-mail address").fill(email);
  await page.getByLabel("Choose a password").fill("short");
  await page.getByRole("button", { name: "Make the account" }).click();
  await expect(page.getByText("The password needs at least 12 characters.").first()).toBeVisible();
  await look(page);
  await page.getByLabel("Choose a password").fill(PASSWORD);
  await page.getByRole("button", { name: "Make the account" }).click();
  await expect(page.getByRole("heading", { name: "Please look into your post" })).toBeVisible();

  const confirm = linkIn(await readMail(email, /confirm your e-mail address/), /^\/verify\//);
  await page.goto(confirm);
  const password = page.getByLabel("Password", { exact: true });
  if (await password.isVisible()) await password.fill(PASSWORD);
  await look(page);
  await page.getByRole("button", { name: "Confirm the address" }).click();
  await expect(page).not.toHaveURL(/\/verify\//);

  const other = await visit();
  await other.goto("/sign-in");
  await other.getByLabel("E-mail address").fill(email);
  await other.getByLabel("Password").fill(PASSWORD);
  await other.getByRole("button", { name: "Sign in" }).click();
  await expect(other).toHaveURL("/account/orders");
  await look(other);

  await page.context().clearCookies();
  await page.goto("/forgotten");
  await page.getByLabel("E-mail address").fill(email);
  await page.getByRole("button", { name: "Send the link" }).click();
  await expect(page.getByText(`If ${email} has an account here, a link is on its way.`)).toBeVisible();
  const reset = linkIn(await readMail(email, /^A new password/), /^\/reset\//);
  await page.goto(reset);
  await look(page);
  await page.getByLabel("New password").fill(NEXT_PASSWORD);
  await page.getByRole("button", { name: "Keep this password" }).click();
  await expect(page).not.toHaveURL(/\/reset\//);
  // The link is used up, and the other browser is signed out.
  await page.goto(reset);
  await expect(page.getByRole("heading", { name: "This link no longer works" })).toBeVisible();
  await other.goto("/account");
  await expect(other).toHaveURL(/\/sign-in\?next=/);
  await other.getByLabel("E-mail address").fill(email);
  await other.getByLabel("Password").fill(NEXT_PASSWORD);
  await other.getByRole("button", { name: "Sign in" }).click();
  await expect(other).toHaveURL("/account");
});

test("an address without an account is answered in the same words, and written nothing", async ({
  visit,
}) => {
  const { email } = newBuyer("Nobody Here");
  const page = await visit();
  await page.goto("/forgotten");
  await page.getByLabel("E-mail address").fill(email);
  await page.getByRole("button", { name: "Send the link" }).click();
  await expect(page.getByText(`If ${email} has an account here, a link is on its way.`)).toBeVisible();
  // Another letter that is sent afterwards has come, so this one would have.
  const known = demoLogin("bookkeeper").email;
  await page.goto("/forgotten");
  await page.getByLabel("E-mail address").fill(known);
  await page.getByRole("button", { name: "Send the link" }).click();
  await readMail(known, /^A new password/);
  expect(await mailsTo(email)).toEqual([]);
});

test("the photographer invites an assistant, who starts to work", async ({ visit }) => {
  const { name, email } = newBuyer("Leofric Sands");
  const page = await visit({ as: "photographer" });
  await page.goto("/studio/people");
  await page.getByLabel("Name", { exact: true }).fill(name);
  await page.getByLabel("E-mail address", { exact: true }).fill(email);
  await page.getByLabel("As", { exact: true }).selectOption("assistant");
  await page.getByRole("button", { name: "Invite", exact: true }).click();
  await expect(page.getByText("The invitation is on its way.")).toBeVisible();
  await look(page);

  const invited = await visit();
  await invited.goto(linkIn(await readMail(email, /invites you to work with/), /^\/invitation\//));
  await expect(invited.getByText(email, { exact: false })).toBeVisible();
  await look(invited);
  await invited.getByLabel("Choose a password").fill(PASSWORD);
  await invited.getByRole("button", { name: "Accept the invitation" }).click();
  await expect(invited).toHaveURL("/studio");
  await expect(invited.getByRole("link", { name: "Orders", exact: false }).first()).toBeVisible();
  await expect(invited.getByRole("link", { name: "Settings" })).toBeHidden();
});

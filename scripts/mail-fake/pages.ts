import { html, type Markup } from "../stripe-fake/markup";
import type { Entry, Message } from "./message-store";

const when = new Intl.DateTimeFormat("en-GB", { dateStyle: "medium", timeStyle: "medium", timeZone: "UTC" });
const size = new Intl.NumberFormat("en-GB", { maximumFractionDigits: 1 });

function time(iso: string): Markup {
  return html`<time datetime="${iso}">${when.format(new Date(iso))} UTC</time>`;
}

function kilobytes(bytes: number): string {
  return `${size.format(Math.max(0.1, bytes / 1000))} kB`;
}

function page(title: string, body: Markup): string {
  return html`<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta name="robots" content="noindex">
<title>${title}</title>
<link rel="icon" href="data:,">
<link rel="stylesheet" href="/assets/mail.css">
</head>
<body>
<header><p><a href="/">Caught mail</a> <span>Nothing here was sent to anyone.</span></p></header>
<main>
${body}
</main>
</body>
</html>
`.text;
}

export type ListState = {
  entries: readonly Entry[];
  search: string;
  /** How many there are beyond the ones shown. */
  older: number;
};

/** The messages, newest first. */
export function listPage({ entries, search, older }: ListState): string {
  const last = entries.at(-1);
  const query = new URLSearchParams({ ...(search && { q: search }), before: last?.id ?? "" });
  const empty = search
    ? `No message has “${search}” in an address or its subject.`
    : "No message has arrived yet.";
  const rows = entries.map(
    (entry) => html`<tr>
<td class="subject"><a href="/messages/${entry.id}">${entry.subject || "(no subject)"}</a></td>
<td class="to">${entry.to.join(", ")}</td>
<td class="when">${time(entry.receivedAt)}</td>
</tr>
`,
  );
  const table = html`<table>
<caption>Newest first</caption>
<thead><tr><th scope="col">Subject</th><th scope="col">To</th><th scope="col">Received</th></tr></thead>
<tbody>
${rows}</tbody>
</table>`;
  return page(
    "Caught mail",
    html`<h1>Caught mail</h1>
<form action="/" role="search">
<label for="q">Address or subject</label>
<input id="q" name="q" value="${search}" autocomplete="off">
<button>Search</button>
${search ? html`<a href="/">Show all</a>` : null}
</form>
${entries.length === 0 ? html`<p>${empty}</p>` : table}
${older > 0 ? html`<p><a href="/?${query.toString()}">${older} older</a></p>` : null}`,
  );
}

/** Text with its web addresses made into links. */
function linked(text: string): Markup {
  const pieces = text.split(/(https?:\/\/[^\s<>"]+[^\s<>".,;:!?)\]])/g);
  const shown = pieces.map((piece, at) => (at % 2 === 1 ? html`<a href="${piece}">${piece}</a>` : piece));
  return html`${shown}`;
}

/** One message. `pictures` lets its HTML part load pictures from elsewhere. */
export function messagePage(message: Message, pictures: boolean): string {
  const { id } = message;
  const subject = message.subject || "(no subject)";
  const frame = `/messages/${id}/html${pictures ? "?pictures=1" : ""}`;
  const headers = Object.entries(message.headers).flatMap(([name, value]) =>
    [value].flat().map((line) => html`<tr><th scope="row">${name}</th><td>${line}</td></tr>\n`),
  );
  return page(
    subject,
    html`<h1>${subject}</h1>
<dl>
<dt>From</dt><dd>${message.from}</dd>
<dt>To</dt><dd>${message.to.join(", ")}</dd>
<dt>Received</dt><dd>${time(message.receivedAt)}</dd>
${
  message.attachments.length > 0
    ? html`<dt>Attached</dt><dd><ul>${message.attachments.map(
        ({ filename, contentType, size: bytes }, at) =>
          html`<li><a href="/messages/${id}/attachments/${at}">${filename ?? "without a name"}</a> <small>${contentType}, ${kilobytes(bytes)}</small></li>`,
      )}</ul></dd>`
    : null
}
</dl>
${
  message.html === null
    ? null
    : html`<section aria-labelledby="html-head">
<h2 id="html-head">HTML</h2>
<iframe src="${frame}" title="The message as HTML" sandbox="allow-popups allow-popups-to-escape-sandbox"></iframe>
<p class="note">${
        pictures
          ? html`Pictures from elsewhere are loaded. <a href="/messages/${id}">Leave them out</a>`
          : html`Pictures from elsewhere are left out. <a href="/messages/${id}?pictures=1">Load them</a>`
      }</p>
</section>`
}
${
  message.text === null
    ? null
    : html`<section aria-labelledby="text-head">
<h2 id="text-head">Text</h2>
<pre class="text" tabindex="0" aria-labelledby="text-head">${linked(message.text)}</pre>
</section>`
}
<section aria-labelledby="headers-head">
<h2 id="headers-head">Headers</h2>
<table class="headers">
<tbody>
${headers}</tbody>
</table>
<p class="note"><a href="/messages/${id}/source">The whole source</a></p>
</section>`,
  );
}

export function missingPage(): string {
  return page(
    "No such message",
    html`<h1>No such message</h1>
<p>It may have been deleted. <a href="/">See what is here</a></p>`,
  );
}

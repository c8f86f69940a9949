import { createHash } from "node:crypto";

export type AtomLink = { rel: string; href: string; type?: string };

export type AtomEntry = {
  id: string;
  title: string;
  summary: string | null;
  updated: string;
  author: string;
  category: string;
  page: string;
};

export type AtomFeed = {
  id: string;
  title: string;
  updated: string;
  author: string;
  links: AtomLink[];
  entries: AtomEntry[];
};

/** A feed as RFC 4287 has it; where it is one of several pages, its links say so (RFC 5005, 3). */
export function atomText(feed: AtomFeed): string {
  return [
    '<?xml version="1.0" encoding="utf-8"?>',
    '<feed xmlns="http://www.w3.org/2005/Atom">',
    element("id", feed.id),
    element("title", feed.title),
    element("updated", feed.updated),
    person(feed.author),
    ...feed.links.map(linkElement),
    ...feed.entries.map(entryElement),
    "</feed>",
    "",
  ].join("\n");
}

/** Made by this project, for names of what it makes: RFC 9562 5.5 asks for a namespace. */
const NAMESPACE = "b1f6a3d0-6c1f-4a1e-9d55-0f7a4c9a2e73";

/** The same id for the same name, for ever: a UUID of version 5. */
export function nameBasedId(name: string, namespace = NAMESPACE): string {
  const space = Buffer.from(namespace.replaceAll("-", ""), "hex");
  const bytes = createHash("sha1").update(space).update(name, "utf8").digest().subarray(0, 16);
  bytes[6] = (bytes[6]! & 0x0f) | 0x50;
  bytes[8] = (bytes[8]! & 0x3f) | 0x80;
  const digits = bytes.toString("hex");
  const cuts = [0, 8, 12, 16, 20, 32];
  return cuts
    .slice(1)
    .map((end, index) => digits.slice(cuts[index], end))
    .join("-");
}

function entryElement(entry: AtomEntry): string {
  return [
    "<entry>",
    element("id", entry.id),
    element("title", entry.title),
    element("updated", entry.updated),
    person(entry.author),
    `<category term="${escaped(entry.category)}"/>`,
    linkElement({ rel: "alternate", href: entry.page, type: "text/html" }),
    ...(entry.summary === null ? [] : [element("summary", entry.summary)]),
    "</entry>",
  ].join("\n");
}

function element(name: string, text: string): string {
  return `<${name}>${escaped(text)}</${name}>`;
}

function person(name: string): string {
  return `<author>${element("name", name)}</author>`;
}

function linkElement({ rel, href, type }: AtomLink): string {
  const typed = type === undefined ? "" : ` type="${escaped(type)}"`;
  return `<link rel="${escaped(rel)}" href="${escaped(href)}"${typed}/>`;
}

/** What XML 1.0 can't hold (its section 2.2) is replaced, a carriage return kept; markup is escaped. */
function escaped(text: string): string {
  return text
    .replaceAll(/[^\t\n\r\u0020-\ud7ff\ue000-\ufffd\u{10000}-\u{10ffff}]/gu, "\ufffd")
    .replaceAll("&", "&amp;")
    .replaceAll("<", "&lt;")
    .replaceAll(">", "&gt;")
    .replaceAll('"', "&quot;")
    .replaceAll("\r", "&#13;");
}

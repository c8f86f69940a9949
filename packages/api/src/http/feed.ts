import * as z from "zod";
import { NEWS_PER_PAGE, readNews } from "@weighhouse/desk/read-news";
import type { News } from "@weighhouse/desk/read-news";
import { atomText, nameBasedId } from "./atom";
import type { AtomLink } from "./atom";
import { respond } from "./respond";
import { route } from "./route";

const ATOM = "application/atom+xml";

export const feedRoutes = [
  route({
    method: "GET",
    path: "feed.atom",
    group: "Ledger",
    summary: "The ledger as a feed",
    says: "An Atom feed (RFC 4287), the newest entry first, 50 a page; its links next and previous lead to older and newer pages (RFC 5005).",
    scope: "read",
    query: z.strictObject({
      to: z.int().min(1).optional().describe("The entry before which the page ends."),
    }),
    gives: { status: 200, types: { [ATOM]: { schema: null, says: "The feed." } } },
    async answer({ desk, actor, origin, request, key, query }) {
      const news = await readNews(desk, actor, { key, ...query });
      const text = atomText(feedOf(news, { origin, key, asked: query.to }));
      return respond(request, text, {
        type: `${ATOM}; charset=utf-8`,
        tag: `feed-${news.from}-${news.to}-${news.size}`,
      });
    },
  }),
];

type Place = { origin: string; key: string; asked: number | undefined };

function feedOf(news: News, place: Place) {
  const pages = `${place.origin}/campaigns/${place.key}`;
  return {
    id: idOf(news.ledger),
    title: `${news.title}: ledger`,
    updated: news.entries[0]!.at,
    author: news.title,
    links: linksOf(news, place),
    entries: news.entries.map(({ seq, at, kind, team, title, summary }) => ({
      id: idOf(`${news.ledger}/${seq}`),
      title,
      summary,
      updated: at,
      author: team ?? news.title,
      category: kind,
      page: `${pages}/ledger/${seq}`,
    })),
  };
}

/** Of the ledger's own id, which no move to another host changes. */
function idOf(name: string): string {
  return `urn:uuid:${nameBasedId(name)}`;
}

function linksOf({ from, to, size }: News, { origin, key, asked }: Place): AtomLink[] {
  const feed = `${origin}/api/v1/campaigns/${key}/feed.atom`;
  const page = (rel: string, end: number | undefined) => ({
    rel,
    href: end === undefined || end >= size ? feed : `${feed}?to=${end}`,
    type: ATOM,
  });
  return [
    { rel: "alternate", href: `${origin}/campaigns/${key}/ledger`, type: "text/html" },
    page("self", asked),
    page("first", undefined),
    ...(to < size ? [page("previous", to + NEWS_PER_PAGE)] : []),
    ...(from > 0 ? [page("next", from)] : []),
    page("last", Math.min(size, size % NEWS_PER_PAGE || NEWS_PER_PAGE)),
  ];
}

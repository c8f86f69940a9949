/** What a GET answers: which bytes, of which type, told apart from earlier ones by which tag. */
export type About = {
  type: string;
  /** The same for the same bytes, and for no others at this address. */
  tag: string;
  headers?: Record<string, string>;
};

/** Answers that a cache may keep and must ask about; one that it has already isn't sent again. */
export function respond(
  request: Request,
  body: string | Uint8Array<ArrayBuffer> | ReadableStream<Uint8Array>,
  about: About,
): Response {
  const etag = `"${about.tag}"`;
  const headers = {
    etag,
    "cache-control": "private, no-cache",
    // One address gives others to other people, and in other forms.
    vary: "Authorization, Cookie, Accept",
    ...about.headers,
  };
  if (isKnown(request.headers.get("if-none-match"), about.tag)) {
    if (body instanceof ReadableStream) void body.cancel();
    return new Response(null, { status: 304, headers });
  }
  return new Response(body, { headers: { "content-type": about.type, ...headers } });
}

export function respondJson(request: Request, value: unknown, tag: string): Response {
  return respond(request, `${JSON.stringify(value)}\n`, { type: "application/json", tag });
}

/** What a POST answers that entered something. */
export function created(value: unknown): Response {
  return new Response(`${JSON.stringify(value)}\n`, {
    status: 201,
    headers: { "content-type": "application/json", "cache-control": "no-store" },
  });
}

/**
 * Whether If-None-Match names what stands here: a list of tags, strong or weak, compared weakly, or
 * `*`, which any answer is (RFC 9110, 13.1.2).
 */
export function isKnown(field: string | null, tag: string): boolean {
  if (field === null) return false;
  if (field.trim() === "*") return true;
  return [...field.matchAll(/(?:W\/)?"([^"]*)"/g)].some(([, known]) => known === tag);
}

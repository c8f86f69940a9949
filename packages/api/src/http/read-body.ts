import { parseJson } from "@weighhouse/campaign/json-text";
import { DeskError, invalid } from "@weighhouse/desk/desk-error";
import { ApiError } from "./api-error";
import { mediaType } from "./media-types";
import type { Route } from "./route";

/**
 * The type of a request's body, one that its route takes.
 *
 * @throws {ApiError} `unsupported-type`, or `too-large` where the body says so before it comes
 */
export function bodyTypeOf(request: Request, route: Route): string {
  const taken = Object.keys(route.takes);
  if (taken.length === 0) return "";
  const type = mediaType(request.headers.get("content-type"));
  const coding = request.headers.get("content-encoding") ?? "identity";
  if (!taken.includes(type) || coding !== "identity") {
    const found = `content of type ${type || "(none given)"}, coded as ${coding}`;
    const allowed = `${taken.join(", ")}, coded as identity`;
    const headers = { "accept-post": taken.join(", "), "accept-encoding": "identity" };
    throw new ApiError("unsupported-type", `found ${found}; allowed ${allowed}`, headers);
  }
  const { maxBytes } = route.takes[type]!;
  const length = Number(request.headers.get("content-length") ?? 0);
  if (maxBytes !== null && length > maxBytes) throw tooLarge(`${length} bytes`, maxBytes);
  return type;
}

/** The same request, whose body throws once more of it has come than is allowed. */
export function limitBody(request: Request, maxBytes: number | null): Request {
  if (request.body === null || maxBytes === null) return request;
  let read = 0;
  const counting = new TransformStream<Uint8Array, Uint8Array>({
    transform(chunk, controller) {
      read += chunk.byteLength;
      if (read > maxBytes) controller.error(tooLarge(`more than ${maxBytes} bytes`, maxBytes));
      else controller.enqueue(chunk);
    },
  });
  return withBody(request, request.body.pipeThrough(counting));
}

/** The same request with another body. */
export function withBody(request: Request, body: ReadableStream<Uint8Array>): Request {
  const { method, headers, signal } = request;
  return new Request(request.url, {
    method,
    headers,
    signal,
    body,
    // undici asks for it where a body is a stream; TypeScript's DOM types don't know it.
    ...({ duplex: "half" } as object),
  });
}

/** The JSON object that was sent; the use-case reads what is in it. */
export async function readJson(request: Request): Promise<Record<string, unknown>> {
  const parsed = parseJson(await request.text());
  if (parsed.problems.length > 0) throw invalid(parsed.problems);
  const { value } = parsed;
  if (typeof value === "object" && value !== null && !Array.isArray(value)) {
    return value as Record<string, unknown>;
  }
  throw new DeskError("invalid", "found no object in the body; allowed is a JSON object");
}

function tooLarge(found: string, maxBytes: number): ApiError {
  return new ApiError("too-large", `found ${found} in the body; allowed at most ${maxBytes}`);
}

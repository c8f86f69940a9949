import { SaxesParser } from "saxes";
import { MAX_CHARACTERS } from "./limits";
import type { TableProblem } from "./table";

/** What a document's elements are told to; a problem given back ends the reading. */
export type XmlListener = {
  open: (name: string, attribute: (name: string) => string | null, line: number) => Refusal;
  text: (text: string, line: number) => Refusal;
  close: (name: string, line: number) => Refusal;
};
export type Refusal = { found: string; allowed: string } | null;

const MAX_DEPTH = 32;
/** Of elements that are no rows and no cells of the table's. */
const MAX_ELEMENTS = 100_000;
/** Of what was found, as it is told. */
const MAX_FOUND = 300;
const CHUNK = 256 * 1024;
const NAMESPACE = /^$|^https?:\/\/www\.ivoa\.net\/xml\/VOTable\//i;

/** Ends the parser, which has no other way to be ended. */
class Ended extends Error {
  readonly problem: TableProblem;

  constructor(problem: TableProblem) {
    super(problem.found);
    this.problem = problem;
  }
}

/**
 * Reads a VOTable's XML, told piece by piece; elements of other namespaces are left out with what is
 * in them. No document type is taken, so no entity but XML's own five means anything.
 */
export function readXml(bytes: Uint8Array, listener: XmlListener): TableProblem | null {
  const parser = new SaxesParser({ xmlns: true, position: true });
  const end = (found: string, allowed: string): never => {
    throw new Ended({ line: parser.line, column: null, found: found.slice(0, MAX_FOUND), allowed });
  };
  const tell = (refusal: Refusal): void => {
    if (refusal !== null) end(refusal.found, refusal.allowed);
  };
  let depth = 0;
  let foreignFrom = 0;
  let elements = 0;
  parser.on("doctype", () =>
    end("a document type (DOCTYPE)", "a VOTable without one, as version 1.1 and later are"),
  );
  parser.on("error", (error) => {
    end(
      `XML that isn't well-formed: ${error.message.replace(/^\d+:\d+: /, "")}`,
      "well-formed XML",
    );
  });
  parser.on("opentag", ({ local, uri, attributes }) => {
    depth += 1;
    if (depth > MAX_DEPTH) end(`elements nested ${depth} deep`, `at most ${MAX_DEPTH}`);
    if (depth === 1 && (local !== "VOTABLE" || !NAMESPACE.test(uri))) {
      end(`the root element ${local}`, "VOTABLE, with IVOA's namespace or none");
    }
    if (foreignFrom === 0 && !NAMESPACE.test(uri)) foreignFrom = depth;
    if (foreignFrom > 0 || (local !== "TD" && local !== "TR")) elements += 1;
    if (elements > MAX_ELEMENTS) {
      end(`more than ${MAX_ELEMENTS} elements beside rows and cells`, "fewer");
    }
    if (foreignFrom > 0) return;
    tell(listener.open(local, (name) => attributes[name]?.value ?? null, parser.line));
  });
  const text = (piece: string): void => {
    if (foreignFrom === 0) tell(listener.text(piece, parser.line));
  };
  parser.on("text", text);
  parser.on("cdata", text);
  parser.on("closetag", ({ local }) => {
    if (foreignFrom === 0) tell(listener.close(local, parser.line));
    else if (foreignFrom === depth) foreignFrom = 0;
    depth -= 1;
  });
  return feed(bytes, parser);
}

function feed(
  bytes: Uint8Array,
  parser: SaxesParser<{ xmlns: true; position: true }>,
): TableProblem | null {
  const refused = (found: string, allowed: string) => ({
    line: null,
    column: null,
    found,
    allowed,
  });
  if (bytes.length > MAX_CHARACTERS) {
    return refused(
      `${bytes.length} bytes`,
      `at most ${MAX_CHARACTERS} in one file; part it into several`,
    );
  }
  const encoding = encodingOf(bytes);
  const label = DECODERS.get(encoding);
  if (label === undefined) {
    return refused(`text in ${encoding}`, `${[...DECODERS.keys()].join(", ")}`);
  }
  const decoder = new TextDecoder(label, { fatal: true });
  try {
    for (let at = 0; at < bytes.length; at += CHUNK) {
      const chunk = bytes.subarray(at, at + CHUNK);
      const text = decoded(decoder, chunk, at + CHUNK < bytes.length);
      if (text === null) {
        const line = parser.line + lineEndsBeforeLoss(new TextDecoder(label).decode(chunk));
        const found = `bytes that aren't ${encoding}`;
        return { line, column: null, found, allowed: `text in ${encoding}, as the file says` };
      }
      parser.write(text);
    }
    parser.close();
    return null;
  } catch (error) {
    if (error instanceof Ended) return error.problem;
    throw error;
  }
}

/** Null: not in the encoding, for which the decoder has only an exception. */
function decoded(
  decoder: InstanceType<typeof TextDecoder>,
  chunk: Uint8Array,
  stream: boolean,
): string | null {
  try {
    return decoder.decode(chunk, { stream });
  } catch {
    return null;
  }
}

function lineEndsBeforeLoss(text: string): number {
  const lost = text.indexOf("\ufffd");
  return text.slice(0, lost === -1 ? text.length : lost).split(/\r\n|\n|\r/).length - 1;
}

/** The encodings that files of the last twenty years come in; each decoder is every browser's. */
const DECODERS = new Map([
  ["utf-8", "utf-8"],
  ["us-ascii", "utf-8"],
  ["iso-8859-1", "iso-8859-1"],
  ["utf-16", "utf-16le"],
  ["utf-16le", "utf-16le"],
  ["utf-16be", "utf-16be"],
]);

/** By byte order mark, or by the pattern of `<?xml`, as XML 1.0, appendix F, has it. */
function encodingOf(bytes: Uint8Array): string {
  const [first = 0, second = 0] = bytes;
  if (first === 0xfe && second === 0xff) return "utf-16be";
  if (first === 0xff && second === 0xfe) return "utf-16le";
  if (first === 0 && second === 0x3c) return "utf-16be";
  if (first === 0x3c && second === 0) return "utf-16le";
  const start = String.fromCharCode(...bytes.subarray(0, 200));
  const declared = /^(?:\u00ef\u00bb\u00bf)?<\?xml\s[^>]*?encoding\s*=\s*["']([\w.:-]+)["']/.exec(
    start,
  );
  const name = declared?.[1]?.toLowerCase() ?? "utf-8";
  if (name.startsWith("utf-16")) return `${name} by its own word only`;
  return name === "utf8" ? "utf-8" : name === "latin1" ? "iso-8859-1" : name;
}

import type { Files } from "./container";
import { judged, notPresent } from "./line";
import type { CheckLine } from "./line";
import { checkWritten } from "./written";
import { figureFiles } from "../content";
import type { Substance } from "../content";

/** Each figure is what the standings, the document and the timeline draw; and there is no other. */
export function checkFigures(files: Files, substance: Substance): CheckLine {
  const check = "figures";
  const expected = figureFiles(substance);
  const written = checkWritten(files, expected, substance.manifest.writer);
  if (!written.compared) return notPresent(check, written.detail);
  const paths = new Set(expected.map(({ path }) => path));
  const strange = [...files.keys()]
    .filter((path) => path.startsWith("figures/") && !paths.has(path))
    .map((path) => `${path}: a figure of nothing in the campaign`);
  return judged(check, [...written.faults, ...strange], written.detail);
}

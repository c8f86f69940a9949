import { MEASUREMENTS_PER_ENTRY } from "@weighhouse/campaign/entries";
import type { Payload } from "@weighhouse/campaign/entries";
import { MAX_PAYLOAD_BYTES } from "@weighhouse/ledger/entry";
import { preparePayload } from "./prepare-payload";
import type { PreparedPayload } from "./prepare-payload";
import { StoreError } from "./store-error";

export type Correlation = { a: string; b: string; coefficient: number };

export type PostingPayload = PreparedPayload & { value: Payload<"measurements.posted"> };

/**
 * Payloads of `measurements.posted` for any number of measurements: at most 1,000 and about half of
 * the largest payload each. Correlations go with the last, when all measurements are there.
 */
export function splitPosting(
  measurements: Record<string, unknown>[],
  correlations: Correlation[],
): PostingPayload[] {
  const groups = groupsOf(measurements);
  const payloads = groups.map(({ begin, end }, index) => {
    const last = index === groups.length - 1;
    return prepare(measurements.slice(begin, end), last ? correlations : [], begin);
  });
  return payloads.length > 0 ? payloads : [prepare([], correlations, 0)];
}

function groupsOf(measurements: Record<string, unknown>[]): { begin: number; end: number }[] {
  const groups: { begin: number; end: number }[] = [];
  let bytes = 0;
  measurements.forEach((measurement, index) => {
    // Defaults that are written out later add some 400 bytes.
    const size = Buffer.byteLength(JSON.stringify(measurement)) + 400;
    const group = groups.at(-1);
    const full =
      group === undefined ||
      group.end - group.begin === MEASUREMENTS_PER_ENTRY ||
      bytes + size > MAX_PAYLOAD_BYTES / 2;
    if (full) {
      groups.push({ begin: index, end: index + 1 });
      bytes = size;
    } else {
      group.end += 1;
      bytes += size;
    }
  });
  return groups;
}

/** Problems point into the whole posting, not into the entry that it became. */
function prepare(
  measurements: Record<string, unknown>[],
  correlations: Correlation[],
  begin: number,
): PostingPayload {
  try {
    const payload = { measurements, correlations };
    return preparePayload({ kind: "measurements.posted", payload }) as PostingPayload;
  } catch (error) {
    if (!(error instanceof StoreError) || begin === 0) throw error;
    const problems = error.problems.map((problem) => ({
      ...problem,
      pointer: problem.pointer.replace(
        /^\/measurements\/(\d+)/,
        (_, index: string) => `/measurements/${Number(index) + begin}`,
      ),
    }));
    throw new StoreError(error.code, error.message, { cause: error, problems });
  }
}

import type { VerdictRow } from "@weighhouse/campaign/standings";
import { formatTension } from "@weighhouse/figures/standing-numbers";
import { Num } from "./number";
import { VerdictMark, verdictInk } from "./verdict-mark";
import { orderMeanings, orderWords, verdictMeanings, verdictWords } from "./verdict-words";

/** One verdict: the tension in sigma first, then our mark and the word. */
export function VerdictCell(props: {
  row: VerdictRow | null;
  /** JSON Pointer of the row in the standings document, such as `/verdicts/3`. */
  at?: string;
  tail?: number;
}) {
  const { row, at } = props;
  if (row === null) return <span className="text-quiet">silent</span>;
  return (
    <span className="inline-flex flex-wrap items-baseline gap-x-1.5">
      {row.tension === null ? null : (
        <span className="min-w-[5ch] text-right">
          <Num
            text={formatTension(row.tension)}
            exact={row.tension}
            at={at ? `${at}/tension` : undefined}
            tail={props.tail}
          />
        </span>
      )}
      <span className="self-center">
        <VerdictMark verdict={row.verdict} />
      </span>
      <span
        className={`text-[13.5px] ${verdictInk(row.verdict)}`}
        title={verdictMeanings[row.verdict]}
        data-at={at ? `${at}/verdict` : undefined}
      >
        {verdictWords[row.verdict]}
      </span>
      {row.order === "after" ? (
        <span className="text-[12.5px] whitespace-nowrap text-quiet" title={orderMeanings.after}>
          {orderWords.after}
        </span>
      ) : null}
    </span>
  );
}

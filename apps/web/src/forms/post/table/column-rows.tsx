"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { ColumnMatch, TableChoices, TimeReading } from "@weighhouse/tables/table-match";
import { Table } from "@/look/table";
import { numberFromText } from "../../entered-text";
import { problemWords } from "../../form-schema";
import { fieldGroups, whyWords } from "./field-choices";
import type { MatchedTable, OpenedColumn } from "./protocol";

interface Props {
  document: CampaignDocument;
  columns: readonly OpenedColumn[];
  matched: MatchedTable;
  choices: TableChoices;
  onChoose: (choices: TableChoices) => void;
}

/** Each column: what it holds, the field it is read as and why, and what is done to its cells. */
export function ColumnRows(props: Props) {
  const facility = facilityTitle(props.document, props.matched.rememberedFor);
  return (
    <Table
      caption="Columns and the fields they are read as"
      stackBelow="middle"
      head={
        <tr>
          <th scope="col">Column</th>
          <th scope="col">Unit</th>
          <th scope="col">First cells</th>
          <th scope="col">Read as</th>
          <th scope="col">Why, and what is done</th>
        </tr>
      }
    >
      {props.matched.matches.map((match, index) => (
        <ColumnRow
          key={`${index} ${match.column}`}
          {...props}
          match={match}
          column={props.columns[index]}
          facility={facility}
        />
      ))}
    </Table>
  );
}

function ColumnRow(
  props: Props & {
    match: ColumnMatch;
    column: OpenedColumn | undefined;
    facility: string | null;
  },
) {
  const { document, match, column, choices, onChoose, facility } = props;
  const quiet = match.field === "extra" || match.field === "ignore";
  return (
    <tr>
      <th scope="row" className="[overflow-wrap:anywhere]">
        <code>{match.column}</code>
        {column?.description ? (
          <div className="max-w-[34ch] text-[13.5px] text-quiet">{column.description}</div>
        ) : null}
      </th>
      <td data-label="Unit">
        <UnitBox {...{ match, choices, onChoose }} given={column?.unit ?? null} />
      </td>
      <td data-label="First cells" className="text-[13.5px] text-quiet [overflow-wrap:anywhere]">
        {column?.samples.map(shortened).join(", ")}
      </td>
      <td data-label="Read as">
        <div className="grid max-w-[320px] gap-1 min-[901px]:min-w-[230px]">
          <select
            aria-label={`Column ${match.column} is read as`}
            className={`${box} ${quiet ? "text-quiet" : ""}`}
            value={match.field}
            onChange={(event) =>
              onChoose({
                ...choices,
                columns: { ...choices.columns, [match.column]: event.target.value },
              })
            }
          >
            {fieldGroups(document, match.field).map(({ title, fields }) => (
              <optgroup key={title} label={title}>
                {fields.map(({ field, words }) => (
                  <option key={field} value={field}>
                    {words}
                  </option>
                ))}
              </optgroup>
            ))}
          </select>
          {timeFields.has(match.field) ? <TimeBoxes {...{ match, choices, onChoose }} /> : null}
        </div>
      </td>
      <td data-label="Why" className="text-[14px]">
        <div>
          <span className="text-quiet">{whyWords(match.why, facility)}</span>
          {match.conversion === null ? null : <div>{match.conversion}</div>}
          {match.problem === null ? null : (
            <div className="font-medium text-rust">{problemWords(match.problem)}</div>
          )}
        </div>
      </td>
    </tr>
  );
}

const box =
  "w-full min-w-0 rounded-sheet border border-edge bg-paper px-1.5 py-1 text-[14px] text-ink";

/** A unit can be said where a number is read; elsewhere there is none. */
function UnitBox(props: {
  match: ColumnMatch;
  given: string | null;
  choices: TableChoices;
  onChoose: (choices: TableChoices) => void;
}) {
  const { match, given, choices, onChoose } = props;
  const [field] = match.field.split("@");
  const takes = unitFields.has(field ?? "") || match.field.startsWith("conditions.");
  if (!takes) return given === null ? null : <span>{given}</span>;
  return (
    <input
      // What was read stands in the box until somebody types; another match starts it anew.
      key={`${match.field} ${match.unit}`}
      aria-label={`Unit of column ${match.column}`}
      className={`${box} max-w-[110px] font-mono text-[13px]`}
      placeholder="as declared"
      defaultValue={match.unit ?? ""}
      autoComplete="off"
      spellCheck={false}
      onBlur={(event) => {
        const unit = event.target.value.trim();
        if (unit === (match.unit ?? "")) return;
        const { [match.column]: _, ...others } = choices.units;
        onChoose({ ...choices, units: unit === "" ? others : { ...others, [match.column]: unit } });
      }}
    />
  );
}

const unitFields = new Set(["value", "sd", "plus", "minus"]);

const timeFields = new Set(["observedAt", "knownSince"]);
const formats: Record<TimeReading["format"], string> = {
  iso: "date and time (ISO 8601)",
  jd: "Julian Date",
  mjd: "Modified Julian Date",
};
const scales: Record<TimeReading["scale"], string> = {
  utc: "UTC",
  tt: "TT",
  tai: "TAI",
  tdb: "TDB",
};
const plainTime: TimeReading = { format: "iso", scale: "utc", offset: 0 };

/** How a column of times is read; where it says so itself, or nothing does, that stands first. */
function TimeBoxes(props: {
  match: ColumnMatch;
  choices: TableChoices;
  onChoose: (choices: TableChoices) => void;
}) {
  const { match, choices, onChoose } = props;
  const { column, time } = match;
  const choose = (changed: Partial<TimeReading>) =>
    onChoose({
      ...choices,
      times: { ...choices.times, [column]: { ...(time ?? plainTime), ...changed } },
    });
  return (
    <div className="grid grid-cols-[minmax(0,1fr)_auto] gap-1">
      <select
        aria-label={`Column ${column}: form of its times`}
        className={box}
        value={time?.format ?? ""}
        onChange={(event) => choose({ format: event.target.value as TimeReading["format"] })}
      >
        {time === null ? <option value="">as they say themselves</option> : null}
        {Object.entries(formats).map(([format, words]) => (
          <option key={format} value={format}>
            {words}
          </option>
        ))}
      </select>
      <select
        aria-label={`Column ${column}: time scale`}
        className={box}
        value={time?.scale ?? ""}
        onChange={(event) => choose({ scale: event.target.value as TimeReading["scale"] })}
      >
        {time === null ? <option value="">zone</option> : null}
        {Object.entries(scales).map(([scale, words]) => (
          <option key={scale} value={scale}>
            {words}
          </option>
        ))}
      </select>
      {time === null || time.format === "iso" ? null : (
        <label className="col-span-2 flex items-center gap-2 text-[13.5px] text-quiet">
          days added
          <input
            key={time.offset}
            aria-label={`Column ${column}: days added`}
            className={`${box} max-w-[110px] font-mono text-[13px]`}
            inputMode="decimal"
            autoComplete="off"
            defaultValue={time.offset}
            onBlur={(event) => {
              const offset = numberFromText(event.target.value) ?? 0;
              if (typeof offset === "number" && offset !== time.offset) choose({ offset });
              else event.target.value = String(time.offset);
            }}
          />
        </label>
      )}
    </div>
  );
}

function shortened(sample: string): string {
  return sample.length > 24 ? `${sample.slice(0, 23)}…` : sample;
}

function facilityTitle(document: CampaignDocument, key: string | null): string | null {
  if (key === null) return null;
  return document.facilities.find((each) => each.key === key)?.title ?? key;
}

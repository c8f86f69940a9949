import { MAX_CELL, MAX_COLUMNS } from "./limits";
import type { RawCell, RawRow } from "./raw-table";
import type { RowProblem, TableProblem } from "./table";
import { addProblem, rowRefusal } from "./row-limit";
import { readBase64 } from "./votable-base64";
import { readBinary } from "./votable-binary";
import { allowedCell, textCell } from "./votable-cells";
import { readField, type TimeSystem, type VoField } from "./votable-fields";
import type { Refusal, XmlListener } from "./votable-xml";

export type VoTable = {
  name: string;
  fields: VoField[];
  rows: RawRow[];
  /** As the file declares it. */
  declaredRows: number | null;
};

type Attribute = (name: string) => string | null;

const MAX_NOTED = 40;
const MAX_DESCRIPTION = 2000;

/** Follows a VOTable's elements and keeps the first table with rows, and what is to be said. */
export class VotableDocument implements XmlListener {
  readonly problems: TableProblem[] = [];
  readonly notes: string[] = [];
  readonly systems = new Map<string, TimeSystem>();
  readonly tables: VoTable[] = [];
  /** The table with rows. */
  chosen: VoTable | null = null;
  readonly #byId = new Map<string, VoTable>();
  #table: VoTable | null = null;
  /** The FIELD or PARAM that is open, and what an INFO says. */
  #field: VoField | null = null;
  #paramValue: string | null = null;
  #info: { name: string; value: string } | null = null;
  #binary: "BINARY" | "BINARY2" | null = null;
  #row: { line: number; cells: RawCell[]; count: number; problems: RowProblem[] } | null = null;
  /** What the open element's text is gathered in; null where text means nothing. */
  #text: string | null = null;

  open(name: string, attribute: Attribute, line: number): Refusal {
    if (this.#row !== null && name !== "TD") {
      return { found: `an element ${name} in a row`, allowed: "TD alone" };
    }
    switch (name) {
      case "TR":
        return this.#openRow(line);
      case "TD":
        return this.#openCell(attribute);
      case "TABLE":
        return this.#openTable(attribute);
      case "FIELD":
        return this.#openField(attribute);
      case "PARAM":
        this.#field = readField(attribute, 0);
        this.#paramValue = attribute("value") ?? "";
        return null;
      case "VALUES":
        if (this.#field !== null) this.#field.nullText = attribute("null") ?? this.#field.nullText;
        return null;
      case "INFO":
        this.#info = { name: attribute("name") ?? "", value: attribute("value") ?? "" };
        this.#text = "";
        return null;
      case "DESCRIPTION":
        this.#text = "";
        return null;
      case "TIMESYS":
        this.#openTimeSystem(attribute);
        return null;
      case "FITS":
        return { found: "data in FITS", allowed: "TABLEDATA, BINARY or BINARY2" };
      case "BINARY":
      case "BINARY2":
        this.#binary = name;
        return null;
      case "STREAM":
        this.#text = "";
        return streamRefusal(attribute);
      default:
        return null;
    }
  }

  text(text: string): Refusal {
    if (this.#text === null) return null;
    this.#text += text;
    if (this.#row === null || this.#text.length <= MAX_CELL) return null;
    return { found: `a cell of more than ${MAX_CELL} characters`, allowed: "less" };
  }

  close(name: string): Refusal {
    const text = this.#text ?? "";
    switch (name) {
      case "TD":
        this.#closeCell(text);
        break;
      case "TR":
        this.#closeRow();
        break;
      case "STREAM":
        this.#text = null;
        return this.#readStream(text);
      case "TABLE":
        this.#table = null;
        break;
      case "DESCRIPTION":
        if (this.#field !== null)
          this.#field.description = oneLine(text.slice(0, MAX_DESCRIPTION)) || null;
        break;
      case "FIELD":
        this.#field = null;
        break;
      case "PARAM":
        this.#closeParam();
        break;
      case "INFO":
        this.#closeInfo(oneLine(text.slice(0, MAX_DESCRIPTION)));
        break;
      default:
        return null;
    }
    this.#text = null;
    return null;
  }

  #openTable(attribute: Attribute): Refusal {
    const id = attribute("ID");
    const like = this.#byId.get(attribute("ref") ?? "");
    const nrows = attribute("nrows");
    this.#table = {
      name: attribute("name") ?? id ?? `number ${this.tables.length + 1}`,
      fields: like === undefined ? [] : [...like.fields],
      rows: [],
      declaredRows: nrows !== null && /^\d{1,9}$/.test(nrows) ? Number(nrows) : null,
    };
    this.tables.push(this.#table);
    if (id !== null) this.#byId.set(id, this.#table);
    return null;
  }

  #openField(attribute: Attribute): Refusal {
    const fields = this.#table?.fields;
    if (fields === undefined) return null;
    if (fields.length === MAX_COLUMNS) {
      return { found: `more than ${MAX_COLUMNS} columns`, allowed: `at most ${MAX_COLUMNS}` };
    }
    const field = readField(attribute, fields.length);
    const names = new Set(fields.map(({ name }) => name));
    if (names.has(field.name)) {
      let number = 2;
      while (names.has(`${field.name}_${number}`)) number += 1;
      this.notes.push(`a second column ${field.name} is called ${field.name}_${number} here`);
      field.name = `${field.name}_${number}`;
    }
    this.#field = field;
    fields.push(field);
    return null;
  }

  #openTimeSystem(attribute: Attribute): void {
    const id = attribute("ID");
    if (id === null) return;
    this.systems.set(id, {
      scale: attribute("timescale"),
      origin: attribute("timeorigin"),
      reference: attribute("refposition"),
    });
  }

  #openRow(line: number): Refusal {
    const table = this.#table;
    if (table === null) return { found: "a TR outside a TABLE", allowed: "rows in tables" };
    this.chosen ??= table;
    const refusal = rowRefusal(table.rows.length, table.fields.length);
    if (refusal !== null) return refusal;
    this.#row = { line, cells: [], count: 0, problems: [] };
    return null;
  }

  #openCell(attribute: Attribute): Refusal {
    if (this.#row === null) return { found: "a TD outside a TR", allowed: "cells in rows" };
    if (this.#text !== null) return { found: "a cell in a cell", allowed: "text alone" };
    const encoding = attribute("encoding");
    if (encoding !== null) return { found: `a cell in ${encoding}`, allowed: "plain text in TD" };
    this.#text = "";
    return null;
  }

  #closeCell(text: string): void {
    const row = this.#row;
    if (row === null || this.#table !== this.chosen) return;
    const field = this.chosen?.fields[row.count];
    row.count += 1;
    if (field === undefined) return;
    const cell = textCell(field, text);
    row.cells.push(cell ?? null);
    if (cell !== undefined) return;
    const found = text.trim().slice(0, 80);
    addProblem(row.problems, { column: field.name, found, allowed: allowedCell(field) });
  }

  #closeRow(): void {
    const row = this.#row;
    this.#row = null;
    const table = this.#table;
    if (row === null || table === null || table !== this.chosen) return;
    const { line, cells, count, problems } = row;
    const expected = table.fields.length;
    if (count !== expected) {
      const found = `${count} ${count === 1 ? "cell" : "cells"}`;
      problems.push({ column: null, found, allowed: `${expected}, as there are fields` });
    }
    while (cells.length < expected) cells.push(null);
    table.rows.push(problems.length === 0 ? { line, cells } : { line, cells, problems });
  }

  #readStream(text: string): Refusal {
    const masked = this.#binary === "BINARY2";
    const table = this.#table;
    if (this.#binary === null || table === null) {
      return { found: "a STREAM of no table", allowed: "BINARY or BINARY2 in a TABLE" };
    }
    this.#binary = null;
    if (this.chosen !== null || text.trim() === "") return null;
    const bytes = readBase64(text);
    if (typeof bytes === "string") return { found: bytes, allowed: "whole base64" };
    this.chosen = table;
    if (table.fields.some(({ problem }) => problem !== null)) return null;
    table.rows = readBinary(bytes, table.fields, { masked, problems: this.problems });
    return null;
  }

  #closeParam(): void {
    if (this.#field !== null && this.#paramValue !== null) {
      const { name, unit } = this.#field;
      this.#note(`parameter ${name}: ${this.#paramValue}${unit === null ? "" : ` ${unit}`}`);
    }
    this.#field = null;
    this.#paramValue = null;
  }

  #closeInfo(text: string): void {
    const info = this.#info;
    this.#info = null;
    if (info?.name.toUpperCase() !== "QUERY_STATUS") return;
    const status = info.value.toUpperCase();
    if (status === "ERROR") {
      const found = `an error of the service that made the file: ${text || "no reason given"}`;
      this.problems.push({ line: null, column: null, found, allowed: "QUERY_STATUS OK" });
    } else if (status === "OVERFLOW") {
      this.#note("the service that made the file left rows out (QUERY_STATUS OVERFLOW)");
    }
  }

  #note(note: string): void {
    if (this.notes.length < MAX_NOTED) this.notes.push(note.slice(0, 300));
  }
}

function streamRefusal(attribute: Attribute): Refusal {
  if (attribute("href") !== null) {
    return {
      found: "data at another address (STREAM with href)",
      allowed: "data in the file itself",
    };
  }
  const encoding = attribute("encoding");
  if (encoding === "base64") return null;
  return { found: `data in the encoding ${encoding ?? "none"}`, allowed: "base64" };
}

function oneLine(text: string): string {
  return text.replaceAll(/\s+/g, " ").trim();
}

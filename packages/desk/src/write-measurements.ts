import { measurementTable } from "@weighhouse/tables/measurement-table";
import { writeEcsv } from "@weighhouse/tables/write-ecsv";
import { writeNdjson } from "@weighhouse/tables/write-ndjson";
import { writeTableCsv } from "@weighhouse/tables/write-table-csv";
import { writeVotable } from "@weighhouse/tables/write-votable";
import type { MeasurementsPage } from "./read-measurements";

const table = (page: MeasurementsPage) => measurementTable(page.measurements, page.document);

/** The forms in which measurements are given, the first being taken where none is asked for. */
export const formats = {
  ndjson: {
    type: "application/x-ndjson",
    says: "A measurement a line.",
    write: (page: MeasurementsPage) => writeNdjson(page.measurements),
  },
  csv: {
    type: "text/csv",
    says: "A table with a header.",
    write: (page: MeasurementsPage) => writeTableCsv(table(page)),
  },
  ecsv: {
    type: "text/ecsv",
    says: "An ECSV table, with units.",
    write: (page: MeasurementsPage) => writeEcsv(table(page)),
  },
  votable: {
    type: "application/x-votable+xml",
    says: "A VOTable (IVOA, 1.4).",
    write: (page: MeasurementsPage) => writeVotable(table(page), { serialization: "TABLEDATA" }),
  },
};

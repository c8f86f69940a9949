import type { CampaignDocument } from "@weighhouse/campaign/document";
import { isDraftTable } from "@weighhouse/tables/drafts";
import { matchColumns } from "@weighhouse/tables/match-columns";
import { readTable } from "@weighhouse/tables/read-table";
import { facilityOfTable } from "@weighhouse/tables/table-facility";
import type { TableContext } from "@weighhouse/tables/table-match";
import type { Desk } from "./desk";
import { layoutDigest, rememberedOf } from "./read-match";
import { rowsOfTable } from "./read-rows";
import type { ReadRows } from "./read-rows";

/**
 * A file's rows, once the campaign's declarations are known: its columns read as they are remembered
 * for the facility that its rows are of.
 *
 * @param file its name is a hint at its format
 */
export async function tableRows(
  desk: Desk,
  key: string,
  file: { name: string; bytes: Uint8Array; defaults: TableContext["defaults"] },
): Promise<(document: CampaignDocument) => ReadRows> {
  const table = readTable(file.name, file.bytes);
  const { defaults } = file;
  if (isDraftTable(table)) return (document) => rowsOfTable(table, { document, defaults });
  const { columns } = table;
  const remembered =
    columns.length === 0 ? [] : await rememberedOf(desk, key, layoutDigest(columns));
  return (document) => {
    const context: TableContext = { document, defaults };
    const facility = facilityOfTable(table, matchColumns(table, context), context);
    const kept = remembered.find((match) => match.facility === facility);
    return rowsOfTable(table, context, kept?.choices);
  };
}

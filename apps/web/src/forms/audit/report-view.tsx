import type { VerifyReport } from "@weighhouse/audit/checks/line";
import { Notice } from "@/look/notice";
import { Table } from "@/look/table";
import { outcomeCounts } from "./check-protocol";

const inks: Record<VerifyReport["lines"][number]["outcome"], string> = {
  ok: "text-fir",
  failed: "text-rust font-semibold",
  "not present": "text-quiet",
};

/** A line per check: what was checked, how it came out, where it failed. */
export function ReportView({ name, report }: { name: string; report: VerifyReport }) {
  return (
    <>
      <Notice tone={report.ok ? "good" : "bad"} label={report.ok ? "Good." : "Not good."}>
        {name}: {outcomeCounts(report)}.
      </Notice>
      <Table
        caption="Checks of the archive"
        head={
          <tr>
            <th scope="col">Check</th>
            <th scope="col">Outcome</th>
            <th scope="col">Detail</th>
          </tr>
        }
      >
        {report.lines.map(({ check, outcome, detail }) => (
          <tr key={`${check} ${detail}`}>
            <th scope="row">{check}</th>
            <td data-label="Outcome" className={`whitespace-nowrap ${inks[outcome]}`}>
              {outcome}
            </td>
            <td data-label="Detail" className="max-w-[70ch] [overflow-wrap:anywhere]">
              {detail}
            </td>
          </tr>
        ))}
      </Table>
    </>
  );
}

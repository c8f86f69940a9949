import type { Problem } from "@weighhouse/campaign/problem";
import { Notice } from "@/look/notice";

/** Why the document cannot be scored: where, what was found, what is allowed. */
export function ScoringProblems({ problems }: { problems: readonly Problem[] }) {
  return (
    <Notice tone="bad" label="This campaign cannot be scored as it stands.">
      <ul className="mt-1 list-disc pl-5">
        {problems.map((problem) => (
          <li key={`${problem.pointer} ${problem.code} ${problem.found}`}>
            <code>{problem.pointer || "/"}</code>: found {problem.found}; allowed {problem.allowed}
          </li>
        ))}
      </ul>
    </Notice>
  );
}

"use client";

const steps = ["statement", "predictions", "review"] as const;
export type Step = (typeof steps)[number];

const titles: Record<Step, string> = {
  statement: "Statement",
  predictions: "Predictions",
  review: "Review and register",
};

export function stepFrom(text: string | null): Step {
  return steps.find((step) => step === text) ?? "statement";
}

/** Where one is; a step that was passed can be gone back to. */
export function Steps({ current, go }: { current: Step; go: (step: Step) => void }) {
  const at = steps.indexOf(current);
  return (
    <ol aria-label="Steps" className="mb-4 flex list-none flex-wrap gap-x-6 gap-y-1 text-[14.5px]">
      {steps.map((step, index) => (
        <li
          key={step}
          aria-current={step === current ? "step" : undefined}
          className={
            step === current
              ? "border-b-3 border-brass pb-0.5 font-medium"
              : "border-b-3 border-transparent pb-0.5 text-quiet"
          }
        >
          {index < at ? (
            <button type="button" className="link cursor-pointer" onClick={() => go(step)}>
              {index + 1} {titles[step]}
            </button>
          ) : (
            `${index + 1} ${titles[step]}`
          )}
        </li>
      ))}
    </ol>
  );
}

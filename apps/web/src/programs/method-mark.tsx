const edges: Record<string, string> = {
  GET: "border-edge",
  POST: "border-brass",
  PUT: "border-brass",
  DELETE: "border-rust",
};

/** The method as a word in a frame: what changes something has a frame of another colour. */
export function MethodMark({ method }: { method: string }) {
  return (
    <span
      className={`inline-block min-w-[62px] rounded-sheet border px-1 text-center text-[12.5px] font-medium ${edges[method] ?? "border-edge"}`}
    >
      {method}
    </span>
  );
}

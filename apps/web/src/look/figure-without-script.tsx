/**
 * What stands in place of an interactive chart where no script runs: the archive's figure. An image,
 * so that its own styles hold under this site's content policy.
 */
export function FigureWithoutScript({ svg, label }: { svg: string; label: string }) {
  return (
    <noscript>
      {/* oxlint-disable-next-line nextjs/no-img-element -- nothing to optimise in text of a few kB */}
      <img
        className="mb-2 max-w-full rounded-sheet bg-white"
        alt={label}
        src={`data:image/svg+xml;charset=utf-8,${encodeURIComponent(svg)}`}
      />
    </noscript>
  );
}

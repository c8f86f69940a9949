const inks = ["h1", "h2", "h3", "h4", "h5", "h6", "h7", "h8"] as const;

/** Colour and shape of a hypothesis by its place of registration: eight colours by five shapes. */
export function inkOf(index: number): string {
  return `var(--${inks[index % inks.length] ?? "h1"})`;
}

const shapes = [
  <rect key="square" x="1.5" y="1.5" width="9" height="9" />,
  <circle key="round" cx="6" cy="6" r="5" />,
  <path key="up" d="M6 .8l5.4 10.2H.6z" />,
  <path key="lozenge" d="M6 .3L11.7 6 6 11.7.3 6z" />,
  <path key="cross" d="M4.2.6h3.6v3.6h3.6v3.6H7.8v3.6H4.2V7.8H.6V4.2h3.6z" />,
];

/** The small mark before a hypothesis's name: no two of forty are alike, in grey too. */
export function HypothesisMark({ index }: { index: number }) {
  return (
    <svg
      viewBox="0 0 12 12"
      width="11"
      height="11"
      aria-hidden="true"
      className="mr-2 inline-block flex-none"
      fill={inkOf(index)}
    >
      {shapes[index % shapes.length]}
    </svg>
  );
}

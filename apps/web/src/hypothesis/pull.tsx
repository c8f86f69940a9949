const REACH = 5;
const WIDTH = 120;

/** A tension drawn on a scale from −5 to +5 sigma, with the first two shaded; beyond, an arrow. */
export function Pull({ tension }: { tension: number }) {
  const x = (sigma: number) => (WIDTH / 2) * (1 + sigma / REACH);
  const beyond = Math.abs(tension) > REACH;
  const at = x(Math.max(-REACH, Math.min(REACH, tension)));
  const inward = tension > 0 ? -7 : 7;
  return (
    <svg viewBox={`0 0 ${WIDTH} 16`} width={WIDTH} height="16" aria-hidden="true">
      <rect x={x(-2)} width={x(2) - x(-2)} y="3" height="10" fill="var(--well)" />
      <rect x={x(-1)} width={x(1) - x(-1)} y="3" height="10" fill="var(--rule)" />
      <line x1="0" x2={WIDTH} y1="8" y2="8" stroke="var(--edge)" />
      <line x1={x(0)} x2={x(0)} y1="1" y2="15" stroke="var(--edge)" />
      {beyond ? (
        <path d={`M${at} 8l${inward} -5v10z`} fill="var(--ink)" />
      ) : (
        <circle cx={at} cy="8" r="4" fill="var(--ink)" />
      )}
    </svg>
  );
}

/** The house's mark: a beam on its post, one pan lower. */
export function BeamMark() {
  return (
    <svg
      viewBox="0 0 28 22"
      width="28"
      height="22"
      aria-hidden="true"
      fill="none"
      stroke="currentColor"
      strokeWidth="1.6"
    >
      <path d="M14 2v17M9 20h10" />
      <path d="M3 7.6l22-3.2" stroke="var(--brass)" strokeWidth="2.4" />
      <path d="M3 8v5M25 5v4M.8 13h4.4M22.8 9h4.4" />
    </svg>
  );
}

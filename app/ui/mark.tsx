/** The mark: a shallow arc over a spot. It takes the colour of the text around it; on the bar that is sand. */
export function Mark({ className = "h-7 w-7" }: { className?: string }) {
  return (
    <svg aria-hidden="true" viewBox="0 0 32 32" className={className}>
      <path
        d="M4 22.5C4 14 9.4 9.5 16 9.5S28 14 28 22.5"
        fill="none"
        stroke="currentColor"
        strokeWidth="3"
        strokeLinecap="round"
      />
      <circle cx="16" cy="21.4" r="3" fill="currentColor" />
    </svg>
  );
}

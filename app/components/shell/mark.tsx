/** The product's mark: three tubes and what falls from the lowest. */
export function Mark({ size = 28 }: { size?: number }) {
  return (
    <svg viewBox="0 0 28 32" width={size * 0.875} height={size} aria-hidden="true" className="shrink-0">
      <g fill="none" stroke="var(--verdigris)" strokeWidth="2.6">
        <circle cx="6.6" cy="6.2" r="4.4" />
        <circle cx="21.4" cy="6.2" r="4.4" />
        <circle cx="14" cy="18" r="4.4" />
      </g>
      <circle cx="14" cy="28" r="2.5" fill="var(--copper)" />
    </svg>
  )
}

/** The mark: an armful of cut stalks, tied, with their heads up. */
export function GavelMark({ className = 'size-7' }: { className?: string }) {
  return (
    <svg viewBox="0 0 28 28" className={className} aria-hidden="true">
      <g fill="none" stroke="currentColor" strokeWidth="1.8" strokeLinecap="round">
        <path d="M6 8c3 5 5 9 6 17M14 6v19M22 8c-3 5-5 9-6 17" />
      </g>
      <g fill="currentColor">
        <ellipse cx="14" cy="4.6" rx="1.9" ry="3.4" />
        <ellipse cx="5" cy="6.2" rx="1.9" ry="3.4" transform="rotate(-30 5 6.2)" />
        <ellipse cx="23" cy="6.2" rx="1.9" ry="3.4" transform="rotate(30 23 6.2)" />
      </g>
      <path d="M8.2 17h11.6" stroke="var(--color-ahead)" strokeWidth="3.4" strokeLinecap="round" />
    </svg>
  );
}

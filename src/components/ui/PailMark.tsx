/** The mark: a pail, half full. */
export function PailMark() {
  return (
    <svg viewBox="0 0 48 48" aria-hidden="true">
      <path d="M7 25h34l-3 19H10z" fill="currentColor" />
      <path d="M4 5h40l-6 39H10z" fill="none" stroke="currentColor" strokeWidth="4" />
    </svg>
  );
}

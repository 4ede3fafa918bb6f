/** A lapsed grant never stops who is recording; it asks for a sign-in when there is a network. */
export function LapsedNote() {
  return (
    <div className="note mt-2" role="status">
      <span className="g g-clock">Sign-in has run out. Keep working.</span>
      <a className="key" href={`/sign-in?next=${encodeURIComponent(location.pathname + location.search)}`}>
        Sign in
      </a>
    </div>
  );
}

import type { ReactNode } from 'react';

interface Props {
  title: string;
  /** Under the title, lighter. */
  sub?: string;
  /** `onGo` goes back inside the page instead of loading `href`. */
  back?: { href: string; label: string; onGo?: () => void };
  children?: ReactNode;
}

/** The head of a screen: back, what it is, and at most one chip. */
export function Top({ title, sub, back, children }: Props) {
  return (
    <header className="top">
      {back ? (
        <a
          className="key back"
          href={back.href}
          aria-label={back.label}
          onClick={(event) => {
            if (back.onGo === undefined) return;
            event.preventDefault();
            back.onGo();
          }}
        >
          <span className="g g-back" />
        </a>
      ) : null}
      {sub === undefined ? (
        <h1>{title}</h1>
      ) : (
        <div>
          <h1 className="text-24">{title}</h1>
          <small className="ink2">{sub}</small>
        </div>
      )}
      {children}
    </header>
  );
}

import { useState } from 'react';

export interface OpenItem {
  id: string;
  name: string;
  detail: string;
  href: string;
}

const FEW = 3;
/** So many fit on one page with four others. */
const ON_PAPER = 8;

interface Props {
  title: string;
  glyph: string;
  /** Where the items are not the things that are counted. */
  count?: number | undefined;
  items: readonly OpenItem[];
}

/** One kind of open point: how many, the first few, the rest on demand. */
export function ShiftSummaryPoint({ title, glyph, count, items }: Props) {
  const [all, setAll] = useState(false);
  const shown = all ? items : items.slice(0, ON_PAPER);
  const hidden = items.length - FEW;
  return (
    <div className="point">
      <h3>
        <b className="num">{count ?? items.length}</b> <span className={`g ${glyph}`}>{title}</span>
      </h3>
      <ul className={count === undefined ? '' : 'screen-only'}>
        {shown.map(({ id, name, detail, href }, n) => (
          <li key={id} className={!all && n >= FEW ? 'paper-only' : n >= ON_PAPER ? 'screen-only' : ''}>
            <a className="row" href={href}>
              <div>
                <b>{name}</b>
                <small className="ink2">{detail}</small>
              </div>
              <span className="g g-on" />
            </a>
          </li>
        ))}
      </ul>
      {items.length > ON_PAPER ? <p className="paper-only">and {items.length - ON_PAPER} more</p> : null}
      {!all && hidden > 0 ? (
        <button type="button" className="key wide screen-only" onClick={() => setAll(true)}>
          {hidden} more
        </button>
      ) : null}
    </div>
  );
}

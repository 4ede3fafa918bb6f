import { type CSSProperties, useMemo } from 'react';
import { formatBucketCode } from '#domain/bucket-code.ts';
import { type LabelContent, type LabelSize, symbolText } from './label-content.ts';
import { qrPath } from './qr-path.ts';

const QUIET = 4;

/** One label, black on white in every theme; an em is a millimetre. */
export function Label({ content, size }: { content: LabelContent; size: LabelSize }) {
  const code = formatBucketCode(content.code);
  const symbol = <Symbol text={symbolText(content.address, content.code, size)} />;
  if (size === 'l51') {
    return (
      <article className="paper l51">
        {symbol}
        <b className="cd">{code.replace('-', '\n')}</b>
      </article>
    );
  }
  return (
    <article className={`paper ${size}`}>
      <div>
        <p>
          <b className={`nm ${nameSize(content.name)}`}>{content.name}</b>
          <span className="fm">{content.formula}</span>
        </p>
        <p className="kv">
          {content.lines.map((line) => (
            <span key={line} className="block">
              {line}
            </span>
          ))}
        </p>
        <p>
          <b className="cd">{code}</b>
          <span className="hz">{content.hazards}</span>
        </p>
      </div>
      <div>
        {symbol}
        <div className="dab">
          <i>dab here</i>
        </div>
      </div>
    </article>
  );
}

function nameSize(name: string): '' | 'long' | 'longer' {
  if (name.length <= 12) return '';
  return name.length <= 24 ? 'long' : 'longer';
}

function Symbol({ text }: { text: string }) {
  const { path, modules } = useMemo(() => qrPath(text), [text]);
  const side = modules + 2 * QUIET;
  return (
    <svg
      className="qr"
      style={{ '--n': side } as CSSProperties}
      viewBox={`${-QUIET} ${-QUIET} ${side} ${side}`}
      shapeRendering="crispEdges"
      role="img"
      aria-label="QR code"
    >
      <path d={path} />
    </svg>
  );
}

import { WrongCode } from '#components/ui/WrongCode.tsx';
import type { Row } from '#contract/rows.ts';

interface Props {
  text: string;
  onText: (text: string) => void;
  onOpen: () => void;
  wrong: { problem: string; near: Row<'buckets'> | undefined } | undefined;
}

/** The code typed by hand: always there, whatever the camera does. */
export function CodeBox({ text, onText, onOpen, wrong }: Props) {
  return (
    <form
      className="stack gap-4"
      onSubmit={(event) => {
        event.preventDefault();
        onOpen();
      }}
    >
      <label className="field">
        <span>Tub code</span>
        <input
          className="code-box"
          value={text}
          placeholder="MN7W-YDF4"
          autoComplete="off"
          autoCapitalize="characters"
          autoCorrect="off"
          spellCheck={false}
          enterKeyHint="go"
          maxLength={80}
          aria-invalid={wrong !== undefined}
          aria-describedby="code-wrong"
          onChange={(event) => onText(event.target.value)}
        />
      </label>
      <div id="code-wrong">{wrong === undefined ? null : <WrongCode {...wrong} />}</div>
      <button type="submit" className={`key wide ${text.trim() === '' ? 'log-key' : 'go'}`}>
        Open the tub
      </button>
    </form>
  );
}

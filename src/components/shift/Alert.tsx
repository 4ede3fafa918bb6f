/** What is wrong and what to do, said at once; takes no room while there is nothing. */
export function Alert({ text, id }: { text: string | undefined; id?: string }) {
  return (
    <p id={id} role="alert" className={text === undefined ? 'hidden' : 'badge warn g-warn whitespace-normal'}>
      {text}
    </p>
  );
}

/** Why what was just entered is not on the disk. */
export function Unsaved({ why }: { why: string }) {
  return (
    <p className="badge stop g-stop whitespace-normal" role="alert">
      {why}
    </p>
  );
}

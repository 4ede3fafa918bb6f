/** What stands for the code in `/b/CODE`, as it was typed; half an escape stays as it is. */
export function codeInPath(pathname: string): string {
  const last = pathname.split('/').at(-1) ?? '';
  try {
    return decodeURIComponent(last);
  } catch {
    return last;
  }
}

import { type SyntheticEvent, useRef, useState } from 'react';
import { PailMark } from '#components/ui/PailMark.tsx';
import { requestSignIn } from '#offline/request-sign-in.ts';

/** E-mail and password; the first sign-in on a browser makes it a station of the shop. */
export function SignInPage() {
  const [problem, setProblem] = useState<string>();
  const [sending, setSending] = useState(false);
  const alert = useRef<HTMLParagraphElement>(null);

  async function submit(event: SyntheticEvent<HTMLFormElement, SubmitEvent>) {
    event.preventDefault();
    const form = new FormData(event.currentTarget);
    setSending(true);
    const result = await requestSignIn({
      email: String(form.get('email')).trim(),
      password: String(form.get('password')),
    });
    setSending(false);
    if (result.ok) {
      location.replace(nextPath(new URLSearchParams(location.search).get('next')));
      return;
    }
    setProblem(result.problem);
    alert.current?.focus();
  }

  return (
    <main className="mx-auto grid min-h-dvh w-full max-w-[520px] content-center gap-6 p-4">
      <h1 className="text-38 flex items-center gap-3 [&_svg]:w-12">
        <PailMark />
        Halfpail
      </h1>
      <form className="stack gap-4" onSubmit={(event) => void submit(event)} noValidate={false}>
        <p
          ref={alert}
          tabIndex={-1}
          role="alert"
          className={problem === undefined ? '' : 'badge stop g-stop whitespace-normal'}
        >
          {problem}
        </p>
        <label className="field">
          <span>E-mail</span>
          <input name="email" type="email" autoComplete="username" required autoFocus />
        </label>
        <label className="field">
          <span>Password</span>
          <input name="password" type="password" autoComplete="current-password" required />
        </label>
        <button type="submit" className="key go wide" disabled={sending}>
          {sending ? 'Signing in' : 'Sign in'}
        </button>
      </form>
      <p className="ink2">Sign in once where there is a network. Then this device works without one.</p>
    </main>
  );
}

/** Only a path of this site is followed. */
function nextPath(next: string | null): string {
  return next !== null && /^\/(?!\/|\\)/.test(next) ? next : '/';
}

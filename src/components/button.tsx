import type { ComponentProps } from 'react';
import { Link, type LinkProps } from 'react-router-dom';

/** `main` for the one step a page is about, `plain` for the others, `quiet` for steps inside a row or a sentence. */
export type ButtonTone = 'main' | 'plain' | 'quiet' | 'danger';

const shape =
  'tap-target inline-flex items-center justify-center gap-2 rounded-md py-2 text-center font-semibold no-underline disabled:opacity-60';

const tones: Record<ButtonTone, string> = {
  main: 'bg-action text-on-action border border-action px-4 hover:underline',
  plain: 'bg-card text-action border border-action px-4 hover:underline',
  quiet: 'text-action underline underline-offset-4 px-2 hover:decoration-2',
  danger: 'bg-card text-stop border border-stop px-4 hover:underline',
};

type ButtonProps = ComponentProps<'button'> & {
  tone?: ButtonTone;
  /** The step is under way: the button stays in place, cannot be pressed twice and says so. */
  isBusy?: boolean;
};

/** A step the person takes. Keeps its words while busy, so that nothing jumps. */
export function Button({ tone = 'plain', isBusy = false, className = '', disabled, ...rest }: ButtonProps) {
  return (
    <button
      type="button"
      {...rest}
      disabled={disabled === true || isBusy}
      aria-busy={isBusy || undefined}
      className={`${shape} ${tones[tone]} ${className}`}
    />
  );
}

/** A link that looks like a step, for one that leads to another page. */
export function LinkButton({ tone = 'plain', className = '', ...rest }: LinkProps & { tone?: ButtonTone }) {
  return <Link {...rest} className={`${shape} ${tones[tone]} ${className}`} />;
}

import { useId, type ReactNode } from 'react';

type ProgressProps = {
  label: ReactNode;
  /** Done so far, 0 to 1; without it the length of the task is not known. */
  share?: number;
};

/** A long task under way: what it is and, where known, how far it has come. */
export function Progress({ label, share }: ProgressProps) {
  const id = useId();
  return (
    <div role="status" className="flex flex-col gap-1">
      <label htmlFor={id} className="text-sm">
        {label}
      </label>
      <progress
        id={id}
        max={1}
        {...(share === undefined ? {} : { value: share })}
        className="progress-bar h-3 w-full"
      />
    </div>
  );
}

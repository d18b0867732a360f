import { useEffect, useId, useRef, useState, type ReactNode } from 'react';
import { useLocation } from 'react-router-dom';

/** From this width on there is room for everything; below it a section is one line until it is asked for. */
const roomy = '(width >= 64rem)';

type FoldedSectionProps = {
  /** Its name in the address: `#id` opens it. */
  id: string;
  title: string;
  /** What stands inside, in a few words. */
  note?: ReactNode;
  /** On paper too; what can only be filled in or pressed stays off it. */
  isOnPaper?: boolean;
  children: ReactNode;
};

/** A part of a page under its heading: open where there is room, a line to press on a phone. */
export function FoldedSection({ id, title, note, isOnPaper = false, children }: FoldedSectionProps) {
  const titleId = useId();
  const section = useRef<HTMLElement>(null);
  const { hash } = useLocation();
  const isAskedFor = hash === `#${id}`;
  const [isOpen, setOpen] = useState(() => isAskedFor || window.matchMedia(roomy).matches);
  useEffect(() => {
    if (isAskedFor) section.current?.scrollIntoView();
  }, [isAskedFor]);
  return (
    <section
      id={id}
      ref={section}
      aria-labelledby={titleId}
      className={`scroll-mt-2 border-t border-rule pt-1 ${isOnPaper ? 'print:border-0' : 'print:hidden'}`}
    >
      <details open={isOpen} onToggle={(event) => setOpen(event.currentTarget.open)}>
        <summary className="tap-target flex items-center gap-x-3 py-2">
          <h2 id={titleId}>{title}</h2>
          {note && <span className="text-sm text-faded">{note}</span>}
          <span aria-hidden="true" className="ml-auto text-sm text-action print:hidden">
            {isOpen ? '▲' : '▼'}
          </span>
        </summary>
        <div className="flex flex-col gap-4 pb-2">{children}</div>
      </details>
    </section>
  );
}

type SectionLinkProps = { id: string; className?: string; children: ReactNode };

/** A way to a section of the same page, which it opens, even where the address names that section already. */
export function SectionLink({ id, className, children }: SectionLinkProps) {
  const open = () => document.getElementById(id)?.querySelector('details')?.setAttribute('open', '');
  return (
    <a href={`#${id}`} onClick={open} className={className}>
      {children}
    </a>
  );
}

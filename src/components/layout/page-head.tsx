import { useEffect, type ReactNode } from 'react';

interface Props {
  title: string;
  /** Before the title: the mark of a domain, a back link. */
  before?: ReactNode;
  /** One or two sentences from the data: what holds, what does not. */
  finding?: ReactNode;
  /** State chips beside the title. */
  chips?: ReactNode;
  /** Main action last. */
  actions?: ReactNode;
}

/** The head of a page: its one `h1`, the finding, what can be done. Also names the browser's tab. */
export function PageHead({ title, before, finding, chips, actions }: Props) {
  useEffect(() => {
    document.title = `${title} · Selvage`;
  }, [title]);
  return (
    <div className="mb-3 flex flex-wrap items-start gap-x-4 gap-y-2.5 md:flex-nowrap">
      <div className="min-w-0 flex-1 basis-full md:basis-0">
        <div className="flex flex-wrap items-center gap-x-2 gap-y-1">
          {before}
          <h1 className="min-w-0 font-read text-title">{title}</h1>
          {chips}
        </div>
        {finding && (
          <div className="max-w-[54rem] font-read text-finding text-pretty text-ink-2">
            {finding}
          </div>
        )}
      </div>
      {actions && (
        <div className="flex flex-wrap items-center gap-2 pt-0.5 md:justify-end">{actions}</div>
      )}
    </div>
  );
}

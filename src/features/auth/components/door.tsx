import { useEffect, type ReactNode } from 'react';
import { CoreMotif } from '#src/components/layout/core-motif.tsx';
import { Brand } from '#src/components/layout/mark.tsx';

interface Props {
  title: string;
  children: ReactNode;
}

/** The page before sign-in: the form at the left, core laid in trays at the right. */
export function Door({ title, children }: Props) {
  useEffect(() => {
    document.title = `${title.replace(/\.$/, '')} · Selvage`;
  }, [title]);
  return (
    <div className="grid min-h-dvh grid-cols-[minmax(0,1fr)] grid-rows-[auto_1fr_auto] overflow-hidden md:grid-cols-[400px_minmax(0,1fr)] md:grid-rows-[1fr_auto]">
      <div
        aria-hidden
        className="h-[190px] overflow-hidden border-b border-rule md:sticky md:top-0 md:col-start-2 md:row-span-2 md:row-start-1 md:grid md:h-dvh md:items-center md:border-b-0 md:border-l md:pl-8"
      >
        <CoreMotif className="block h-auto w-[620px] max-w-none max-md:-ml-[210px] md:w-[1000px] xl:w-[1500px]" />
      </div>
      <main
        id="main"
        tabIndex={-1}
        className="grid content-start gap-3.5 px-6 pt-7 md:col-start-1 md:row-start-1 md:content-center md:px-12 md:pt-8"
      >
        <Brand />
        <h1 className="mt-2 mb-1 font-read text-[1.75rem] leading-[2.125rem] font-semibold text-balance">
          {title}
        </h1>
        {children}
      </main>
      <footer className="px-6 py-4 text-caption text-ink-3 md:col-start-1 md:row-start-2 md:px-12 md:pt-4 md:pb-6">
        Results support, and do not replace, the judgement of a qualified person.
      </footer>
    </div>
  );
}

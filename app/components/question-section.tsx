import type { ReactNode } from 'react';

interface QuestionSectionProps {
  id: string;
  title: string;
  /** The short answer under the title, with the colour of what it says. */
  answer?: ReactNode;
  /** The words and figures beside the evidence. */
  words?: ReactNode;
  children: ReactNode;
}

/** One of a page's questions: words in the narrow column, evidence in the wide one; on a phone below each other. */
export function QuestionSection({ id, title, answer, words, children }: QuestionSectionProps) {
  return (
    <section
      aria-labelledby={id}
      className="border-hair grid gap-x-11 gap-y-4 border-b py-8 last-of-type:border-0 lg:grid-cols-[18rem_minmax(0,1fr)]"
    >
      <div>
        <h2 id={id}>{title}</h2>
        {answer != null && <p className="mt-1 font-bold">{answer}</p>}
        {words}
      </div>
      <div className="min-w-0">{children}</div>
    </section>
  );
}

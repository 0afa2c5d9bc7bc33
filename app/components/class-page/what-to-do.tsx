import type { ReactNode } from 'react';
import type { Conclusion } from '~/advice/conclusion';
import { CautionList } from '../caution-list';
import { QuestionSection } from '../question-section';

/** What to do: the cautions first, then the proposal with what it is worth, why, and what would make it wrong. */
export function WhatToDo({
  conclusion,
  children,
}: {
  conclusion: Pick<Conclusion, 'cautions' | 'proposal' | 'together'>;
  /** What can be done about it, after everything that has to be read first. */
  children?: ReactNode;
}) {
  const { cautions, proposal, together } = conclusion;
  const { title, worth, why, whatWouldMakeItWrong, whatIsMissing } = proposal.words;
  return (
    <QuestionSection
      id="what-to-do"
      title="What to do"
      words={<p className="text-grey text-[0.92rem]">Cautions first. They are part of the advice.</p>}
    >
      <CautionList cautions={cautions} />
      <p className="mt-6 text-[1.3rem] leading-snug font-bold">{title}</p>
      {worth !== null && <p className="mt-1">{worth}</p>}
      <p className="mt-1">{together}</p>
      <Sentences title="Why" sentences={why} />
      <Sentences title="What would make this wrong" sentences={whatWouldMakeItWrong} />
      <Sentences title="What is missing" sentences={whatIsMissing} />
      {children}
    </QuestionSection>
  );
}

function Sentences({ title, sentences }: { title: string; sentences: readonly string[] }) {
  if (sentences.length === 0) return null;
  return (
    <>
      <h3 className="mt-4">{title}</h3>
      <ul className="mt-1 list-disc pl-5">
        {sentences.map((sentence) => (
          <li key={sentence}>{sentence}</li>
        ))}
      </ul>
    </>
  );
}

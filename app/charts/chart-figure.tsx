import { useId, type ReactNode } from 'react';

import type { ChartSize } from './plot-frame';

/** The numbers a chart was drawn from, as people would read them. */
export interface ChartTable {
  readonly columns: readonly string[];
  readonly rows: readonly (readonly string[])[];
}

export interface Drawing {
  readonly width: number;
  readonly height: number;
  readonly content: ReactNode;
}

interface ChartFigureProps {
  title: string;
  /** What there is to see, in a sentence; also what a screen reader says. */
  sentence: string;
  table: ChartTable;
  /** Draws for one size; `idPrefix` keeps pattern ids of several charts on a page apart. */
  draw: (size: ChartSize, idPrefix: string) => Drawing;
}

/** A chart with its title, its sentence and its numbers; drawn for a desk and for a phone. */
export function ChartFigure({ title, sentence, table, draw }: ChartFigureProps) {
  const id = useId();
  return (
    <figure className="chart">
      <figcaption className="chart-title" id={`${id}-title`}>
        {title}
      </figcaption>
      {(['wide', 'narrow'] as const).map((size) => {
        const { width, height, content } = draw(size, `${id}-${size}`);
        return (
          <svg
            key={size}
            className={`chart-drawing chart-drawing-${size}`}
            viewBox={`0 0 ${width} ${height}`}
            role="img"
            aria-labelledby={`${id}-title`}
            aria-describedby={`${id}-sentence`}
          >
            {content}
          </svg>
        );
      })}
      <p className="chart-note" id={`${id}-sentence`}>
        {sentence}
      </p>
      <ChartNumbers title={title} table={table} />
    </figure>
  );
}

/** In place of a chart that has nothing to draw: its title and why. */
export function ChartAbsent({ title, reason }: { title: string; reason: string }) {
  return (
    <figure className="chart">
      <figcaption className="chart-title">{title}</figcaption>
      <p className="text-grey">{reason}</p>
    </figure>
  );
}

function ChartNumbers({ title, table }: { title: string; table: ChartTable }) {
  return (
    <details className="chart-numbers">
      <summary>The numbers behind it</summary>
      {/* Scrolls sideways on a phone, so it must be reachable by keyboard. */}
      {/* eslint-disable-next-line jsx-a11y/no-noninteractive-tabindex */}
      <div className="chart-numbers-scroll" tabIndex={0} role="group" aria-label={`${title}: numbers`}>
        <table>
          <caption className="sr-only">{title}</caption>
          <thead>
            <tr>
              {table.columns.map((column) => (
                <th key={column} scope="col">
                  {column}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {table.rows.map((row, index) => (
              <tr key={index}>
                {row.map((cell, cellIndex) => (
                  <td key={cellIndex}>{cell}</td>
                ))}
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </details>
  );
}

import temml from 'temml';

/**
 * A formula as MathML, which browsers draw and screen readers read.
 *
 * @param tex of our own writing, never from anybody else.
 * @throws when it is not TeX.
 */
export function formulaInMathMl(tex: string, display: 'block' | 'inline'): string {
  return temml.renderToString(tex, { displayMode: display === 'block', throwOnError: true, annotate: false });
}

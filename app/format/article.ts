/** A noun with its indefinite article: "a seal", "an electrode". Goes by the first letter, not by its sound. */
export function withArticle(noun: string): string {
  return `${/^[aeiou]/i.test(noun) ? 'an' : 'a'} ${noun}`;
}

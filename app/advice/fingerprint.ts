/**
 * A running fingerprint of numbers and texts in order: the same in, the same out, and any change of them
 * shows but for one chance in 2⁶⁴. Not meant against forgery.
 *
 * Two lanes of FNV-1a over 32-bit words, the second with a rotation and another multiplier. Sources: Fowler,
 * Noll & Vo (FNV-1a); the second lane's constants are Appleby's MurmurHash3, from memory.
 */
export class Fingerprint {
  private low = 0x811c9dc5;
  private high = 0x9747b28c;
  private readonly double = new Float64Array(1);
  private readonly oneWord = new Uint32Array(1);
  private readonly words = new Uint32Array(this.double.buffer);

  addNumber(value: number): void {
    this.double[0] = value;
    this.addWords(this.words);
  }

  addText(text: string): void {
    for (let index = 0; index < text.length; index += 1) this.addWord(text.charCodeAt(index));
    this.addWord(text.length);
  }

  /** The first `count` numbers of an array. */
  addNumbers(values: Float64Array, count: number): void {
    this.addWords(new Uint32Array(values.buffer, values.byteOffset, 2 * count));
  }

  /** 16 hexadecimal digits for all that was added so far. */
  digest(): string {
    const hex = (lane: number) => (lane >>> 0).toString(16).padStart(8, '0');
    return hex(this.high) + hex(this.low);
  }

  private addWord(word: number): void {
    this.oneWord[0] = word;
    this.addWords(this.oneWord);
  }

  private addWords(words: Uint32Array): void {
    let { low, high } = this;
    for (let index = 0; index < words.length; index += 1) {
      const word = words[index]!;
      low = Math.imul(low ^ word, 0x01000193);
      // Carries high bits down, which multiplication alone never does.
      low ^= low >>> 15;
      const mixed = Math.imul(word, 0xcc9e2d51);
      high ^= (mixed << 15) | (mixed >>> 17);
      high = (Math.imul((high << 13) | (high >>> 19), 5) + 0x38495ab5) | 0;
    }
    this.low = low;
    this.high = high;
  }
}

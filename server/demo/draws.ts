/**
 * Numbers that look drawn by chance and are the same at every start: the history of the demo firms differs in its dates
 * alone. mulberry32 over a 32-bit hash (FNV-1a) of a name; good enough for stories, not for secrets.
 */
export class Draws {
  private state: number;

  constructor(name: string) {
    this.state = 0x811c9dc5;
    for (const character of name) {
      this.state = Math.imul(this.state ^ (character.codePointAt(0) ?? 0), 0x01000193) >>> 0;
    }
  }

  /** A whole number of 32 bits. */
  private next(): number {
    this.state = (this.state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(this.state ^ (this.state >>> 15), this.state | 1);
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
    return (mixed ^ (mixed >>> 14)) >>> 0;
  }

  /** From 0 up to, and without, 1. */
  share(): number {
    return this.next() / 0x1_0000_0000;
  }

  between(low: number, high: number): number {
    return low + (high - low) * this.share();
  }

  /** A whole number, both ends included. */
  whole(low: number, high: number): number {
    return low + Math.floor(this.share() * (high - low + 1));
  }

  happens(probability: number): boolean {
    return this.share() < probability;
  }

  pick<T>(list: readonly T[]): T {
    const picked = list[Math.floor(this.share() * list.length)];
    if (picked === undefined) throw new RangeError('nothing to pick from');
    return picked;
  }

  /** One of these, each as likely as its weight says. */
  pickWeighted<T>(list: readonly T[], weightOf: (item: T) => number): T {
    let left = this.share() * list.reduce((sum, item) => sum + weightOf(item), 0);
    for (const item of list) {
      left -= weightOf(item);
      if (left < 0) return item;
    }
    return this.pick(list);
  }

  hex(digits: number): string {
    let text = '';
    while (text.length < digits) text += this.next().toString(16).padStart(8, '0');
    return text.slice(0, digits);
  }
}

/** Float64 values added one by one; grows by doubling. */
export class GrowingNumbers {
  #values = new Float64Array(1024);
  length = 0;

  push(value: number): void {
    if (this.length === this.#values.length) {
      const larger = new Float64Array(this.length * 2);
      larger.set(this.#values);
      this.#values = larger;
    }
    this.#values[this.length] = value;
    this.length += 1;
  }

  at(index: number): number {
    return this.#values[index] ?? Number.NaN;
  }

  set(index: number, value: number): void {
    this.#values[index] = value;
  }

  view(): Float64Array {
    return this.#values.subarray(0, this.length);
  }
}

/** Byte flags added one by one. */
export class GrowingBytes {
  #values = new Uint8Array(1024);
  length = 0;

  push(value: number): void {
    if (this.length === this.#values.length) {
      const larger = new Uint8Array(this.length * 2);
      larger.set(this.#values);
      this.#values = larger;
    }
    this.#values[this.length] = value;
    this.length += 1;
  }

  set(index: number, value: number): void {
    this.#values[index] = value;
  }

  view(): Uint8Array {
    return this.#values.subarray(0, this.length);
  }
}

/** Texts kept once each; a row holds the place of its text, NaN when it has none. */
export class GrowingCategory {
  readonly codes = new GrowingNumbers();
  readonly #places = new Map<string, number>();

  push(text: string): void {
    if (text === '') {
      this.codes.push(Number.NaN);
      return;
    }
    let place = this.#places.get(text);
    if (place === undefined) {
      place = this.#places.size;
      this.#places.set(text, place);
    }
    this.codes.push(place);
  }

  textAt(index: number): string {
    return this.texts()[this.codes.at(index)] ?? '';
  }

  texts(): string[] {
    return [...this.#places.keys()];
  }
}

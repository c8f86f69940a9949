/** Big-endian values one after another, in room that grows. */
export class ByteWriter {
  #bytes = new Uint8Array(1024);
  #view = new DataView(this.#bytes.buffer);
  #length = 0;

  get bytes(): Uint8Array<ArrayBuffer> {
    return this.#bytes.subarray(0, this.#length);
  }

  byte(value: number): void {
    const at = this.#take(1);
    this.#view.setUint8(at, value);
  }

  int(value: number): void {
    const at = this.#take(4);
    this.#view.setInt32(at, value);
  }

  long(value: bigint): void {
    const at = this.#take(8);
    this.#view.setBigInt64(at, value);
  }

  double(value: number): void {
    const at = this.#take(8);
    this.#view.setFloat64(at, value);
  }

  utf16(text: string): void {
    const from = this.#take(2 * text.length);
    for (let at = 0; at < text.length; at += 1) {
      this.#view.setUint16(from + 2 * at, text.charCodeAt(at));
    }
  }

  #take(length: number): number {
    const from = this.#length;
    this.#length += length;
    if (this.#length > this.#bytes.length) {
      const grown = new Uint8Array(2 * this.#length);
      grown.set(this.#bytes.subarray(0, from));
      this.#bytes = grown;
      this.#view = new DataView(grown.buffer);
    }
    return from;
  }
}

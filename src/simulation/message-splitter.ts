/** What has come in between two ends of line, or word that it was too much to keep. */
export type Incoming = { readonly kind: 'message'; readonly text: string } | { readonly kind: 'overrun' };

/** The input buffer of a simulated instrument. */
export const INPUT_BUFFER = 4096;

const LINE_FEED = 0x0a;
const CARRIAGE_RETURN = 0x0d;

/**
 * Cuts the bytes that arrive into messages at each LF or CR; empty ones mean nothing. What exceeds the input
 * buffer is thrown away up to the next end of line, so no flood makes it grow.
 */
export class MessageSplitter {
  readonly #buffer = new Uint8Array(INPUT_BUFFER);
  #length = 0;
  #overrun = false;

  *feed(bytes: Uint8Array): Generator<Incoming> {
    for (const byte of bytes) {
      if (byte !== LINE_FEED && byte !== CARRIAGE_RETURN) {
        if (this.#length < INPUT_BUFFER) this.#buffer[this.#length++] = byte;
        else this.#overrun = true;
        continue;
      }
      const text = new TextDecoder('latin1').decode(this.#buffer.subarray(0, this.#length)).trim();
      const overrun = this.#overrun;
      this.#length = 0;
      this.#overrun = false;
      if (overrun) yield { kind: 'overrun' };
      else if (text !== '') yield { kind: 'message', text };
    }
  }
}

/** The most chunks that wait for a reader; one that falls further behind is let go and comes back by itself. */
const CHUNKS_MOST = 256;

const encoder = new TextEncoder();

/** One open response: text goes in, the reader's end or ours closes it, once. */
export class Outlet {
  readonly body: ReadableStream<Uint8Array>;
  #controller: ReadableStreamDefaultController<Uint8Array> | null = null;
  #onClosed: (() => void)[] = [];

  constructor() {
    this.body = new ReadableStream<Uint8Array>(
      {
        start: (controller) => {
          this.#controller = controller;
        },
        cancel: () => this.#end(),
      },
      new CountQueuingStrategy({ highWaterMark: CHUNKS_MOST }),
    );
  }

  get closed(): boolean {
    return this.#controller === null;
  }

  /** Writes for a reader that keeps up; closes for one that does not. */
  write(text: string): void {
    const controller = this.#controller;
    if (!controller) return;
    if ((controller.desiredSize ?? 0) <= 0) return this.close();
    controller.enqueue(encoder.encode(text));
  }

  close(): void {
    const controller = this.#controller;
    if (!controller) return;
    this.#end();
    controller.close();
  }

  whenClosed(act: () => void): void {
    if (this.closed) act();
    else this.#onClosed.push(act);
  }

  #end(): void {
    this.#controller = null;
    for (const act of this.#onClosed.splice(0)) act();
  }
}

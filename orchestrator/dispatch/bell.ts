/** Lets one loop sleep until something happens or time passes. */
export class Bell {
  #rung = false;
  #wake: () => void = () => undefined;

  ring(): void {
    this.#rung = true;
    this.#wake();
  }

  /** Returns at once if it rang since the last time. */
  async wait(milliseconds: number): Promise<void> {
    if (!this.#rung) {
      await new Promise<void>((resolve) => {
        const clock = setTimeout(resolve, milliseconds);
        this.#wake = () => {
          clearTimeout(clock);
          resolve();
        };
      });
    }
    this.#rung = false;
  }
}

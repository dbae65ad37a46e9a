/** Runs tasks one after another for each name, and side by side for different names. */
export class KeyedMutex {
  private readonly tails = new Map<string, Promise<void>>();

  async run<Result>(name: string, task: () => Promise<Result>): Promise<Result> {
    const result = (this.tails.get(name) ?? Promise.resolve()).then(task);
    const tail = result.then(
      () => {},
      () => {},
    );
    this.tails.set(name, tail);
    try {
      return await result;
    } finally {
      if (this.tails.get(name) === tail) this.tails.delete(name);
    }
  }
}

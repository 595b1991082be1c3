/**
 * A session that ended while somebody was working. Requests that meet it wait here for one answer: the dialog "Sign in again"
 * over the page. True: signed in, the request is sent again. False: left alone, the request fails.
 */
function createSessionExpiry() {
  let asked: { answer: (signedIn: boolean) => void; promise: Promise<boolean> } | null = null;
  const listeners = new Set<() => void>();
  const tell = () => {
    for (const listener of [...listeners]) listener();
  };

  return {
    get isAsking() {
      return asked !== null;
    },
    subscribe(listener: () => void) {
      listeners.add(listener);
      return () => void listeners.delete(listener);
    },
    askToSignIn(signal?: AbortSignal): Promise<boolean> {
      if (listeners.size === 0) return Promise.resolve(false);
      if (!asked) {
        let answer: (signedIn: boolean) => void = () => {};
        const promise = new Promise<boolean>((resolve) => {
          answer = resolve;
        });
        asked = { promise, answer };
        tell();
      }
      const { promise } = asked;
      if (!signal) return promise;
      return new Promise((resolve, reject) => {
        const abort = () => reject(signal.reason);
        if (signal.aborted) return abort();
        signal.addEventListener("abort", abort, { once: true });
        void promise.then((signedIn) => {
          signal.removeEventListener("abort", abort);
          resolve(signedIn);
        });
      });
    },
    answer(signedIn: boolean) {
      const waiting = asked;
      asked = null;
      waiting?.answer(signedIn);
      tell();
    },
  };
}

export const sessionExpiry = createSessionExpiry();

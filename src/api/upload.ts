/** A file on its way to the server: by XMLHttpRequest, since fetch tells nothing of how much of a body was sent. */
export interface Upload {
  file: Blob;
  type: string;
  onProgress?: (sent: number, total: number) => void;
}

/** As fetch: rejects only when there is no answer at all. */
export function sendFile(path: string, method: string, { file, type, onProgress }: Upload, signal?: AbortSignal): Promise<Response> {
  return new Promise((resolve, reject) => {
    if (signal?.aborted) return reject(signal.reason);
    const request = new XMLHttpRequest();
    const abort = () => request.abort();
    const settle = (done: () => void) => {
      signal?.removeEventListener("abort", abort);
      done();
    };
    signal?.addEventListener("abort", abort, { once: true });
    request.open(method, path);
    request.setRequestHeader("Accept", "application/json");
    request.setRequestHeader("Content-Type", type);
    request.upload.addEventListener("progress", ({ loaded, total }) => onProgress?.(loaded, total));
    request.addEventListener("load", () =>
      settle(() =>
        resolve(
          new Response([204, 205, 304].includes(request.status) ? null : request.responseText, {
            status: request.status,
            headers: { "Content-Type": request.getResponseHeader("Content-Type") ?? "" },
          }),
        ),
      ),
    );
    request.addEventListener("error", () => settle(() => reject(new TypeError("no answer"))));
    request.addEventListener("abort", () => settle(() => reject(signal?.reason ?? new DOMException("aborted", "AbortError"))));
    request.send(file);
  });
}

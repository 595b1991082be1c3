/** "Balancer rig 1" as "balancer-rig-1"; never empty. */
export function fileStem(name: string): string {
  const stem = name
    .normalize("NFKD")
    .replace(/\p{M}/gu, "")
    .toLowerCase()
    .replace(/[^\p{L}\p{N}]+/gu, "-")
    .replace(/^-+|-+$/g, "")
    .slice(0, 80);
  return stem || "scenario";
}

/** Hands a file to the browser's downloads. */
export function download(fileName: string, content: BlobPart, type: string): void {
  const url = URL.createObjectURL(new Blob([content], { type }));
  const link = document.createElement("a");
  link.href = url;
  link.download = fileName;
  link.click();
  // Some browsers read the address only after the click has returned.
  setTimeout(() => URL.revokeObjectURL(url), 10_000);
}

export const downloadJson = (name: string, value: unknown): void =>
  download(`${fileStem(name)}.json`, `${JSON.stringify(value, null, 2)}\n`, "application/json");

/** RFC 6266 and RFC 8187: the name in ASCII for old programs, and in full. */
export function contentDisposition(kind: "inline" | "attachment", fileName: string): string {
  const ascii = fileName
    .normalize("NFKD")
    .replace(/\p{M}/gu, "")
    .replace(/[^\x20-\x7e]|["\\/]/g, "_");
  const full = encodeURIComponent(fileName).replace(/['()*]/g, (sign) => `%${sign.charCodeAt(0).toString(16).toUpperCase()}`);
  return `${kind}; filename="${ascii}"; filename*=UTF-8''${full}`;
}

import type { Issue } from "./issues.ts";

/** Collects what rules across fields find; one wording for one kind of mistake. */
export class Report {
  readonly issues: Issue[] = [];
  add(code: string, path: string, message: string): void {
    this.issues.push({ code, path, message });
  }
  length(path: string, what: string, found: number, wanted: number, because: string): boolean {
    if (found !== wanted) this.add("wrong-length", path, `${what}: ${found} given, ${wanted} needed, ${because}.`);
    return found === wanted;
  }
  known(path: string, name: string, names: readonly string[], what: string): void {
    if (!names.includes(name)) this.add("unknown-name", path, `"${name}" is not ${what}; permitted: ${names.length ? names.join(", ") : "none"}.`);
  }
  ordered(path: string, from: number, until: number | null): void {
    if (until !== null && until <= from) this.add("out-of-order", path, `It ends at ${until} s but begins at ${from} s; the end has to be later.`);
  }
}

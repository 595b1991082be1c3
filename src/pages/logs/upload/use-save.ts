/** Packs the file in the worker and sends it; the server reads it again and its answer is compared with the page's reading. */
import { useRef, useState } from "react";
import type { LogDetail } from "#shared/api/logs.ts";
import { type ColumnMapping, linkName } from "#shared/reception/types.ts";
import { useUploadLog } from "#src/api/logs/upload-log.ts";
import { failureText } from "#src/components/ui/query-error.tsx";
import type { LogClient } from "#src/workers/log-client.ts";
import type { LogReading } from "#src/workers/log-contract.ts";
import { createProgress, type Progress } from "./progress.tsx";

export type Saving =
  | { state: "idle" }
  | { state: "packing"; progress: Progress }
  | { state: "sending"; progress: Progress }
  | { state: "server" }
  | { state: "failed"; message: string }
  | { state: "saved"; log: LogDetail; existed: boolean; differences: string[] };

/** Where the server's reading is not the page's; empty when both are the same. */
export function differencesOf(page: LogReading, server: Pick<LogDetail, "linkTraces" | "report">): string[] {
  const found: string[] = [];
  if (page.report.rows !== server.report.rows) found.push(`rows: ${page.report.rows} here, ${server.report.rows} at the server`);
  if (page.report.rowsUsed !== server.report.rowsUsed) found.push(`rows used: ${page.report.rowsUsed} here, ${server.report.rowsUsed} at the server`);
  const there = new Map(server.linkTraces.map((link) => [linkName(link), link]));
  for (const link of page.links) {
    const other = there.get(linkName(link));
    if (!other) found.push(`${linkName(link)}: not found at the server`);
    else if (other.packets !== link.packets || other.lost !== link.lost)
      found.push(`${linkName(link)}: ${link.lost} of ${link.packets} lost here, ${other.lost} of ${other.packets} at the server`);
  }
  if (server.linkTraces.length !== page.links.length) found.push(`links: ${page.links.length} here, ${server.linkTraces.length} at the server`);
  return found;
}

export function useSave(client: LogClient | null, teamId: string, onSaved: (saved: Extract<Saving, { state: "saved" }>) => void) {
  const [saving, setSaving] = useState<Saving>({ state: "idle" });
  const uploading = useUploadLog(teamId);
  const stop = useRef<AbortController | null>(null);

  const save = async (file: File, name: string, mapping: ColumnMapping, reading: LogReading) => {
    if (!client) return;
    const controller = new AbortController();
    stop.current = controller;
    const { signal } = controller;
    const show = (next: Saving) => {
      if (!signal.aborted) setSaving(next);
    };
    try {
      const packing = createProgress(file.size);
      show({ state: "packing", progress: packing });
      const packed = await client.pack(file, packing.tell);
      if (signal.aborted) return;
      if (!packed.ok) {
        setSaving("message" in packed ? { state: "failed", message: packed.message } : { state: "idle" });
        return;
      }
      const sending = createProgress(packed.packed.size);
      show({ state: "sending", progress: sending });
      const { log, existed } = await uploading.mutateAsync({
        name,
        fileName: file.name,
        mapping,
        packed: packed.packed,
        signal,
        onProgress: (bytes, ofBytes) => {
          sending.tell({ bytes, ofBytes });
          if (bytes >= ofBytes) show({ state: "server" });
        },
      });
      if (signal.aborted) return;
      const saved = { state: "saved", log, existed, differences: differencesOf(reading, log) } as const;
      setSaving(saved);
      onSaved(saved);
    } catch (error) {
      show({ state: "failed", message: failureText(error) });
    }
  };

  return {
    saving,
    save,
    cancel() {
      stop.current?.abort(new DOMException("stopped", "AbortError"));
      client?.cancel();
      setSaving({ state: "idle" });
    },
  };
}

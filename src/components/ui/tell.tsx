import type { ReactNode } from "react";

/** An error above data that are still there, or a calm remark. */
export function Tell({ children, calm = false }: { children: ReactNode; calm?: boolean }) {
  return (
    <div className={`tell ${calm ? "calm" : ""}`} role={calm ? "status" : "alert"}>
      {children}
    </div>
  );
}

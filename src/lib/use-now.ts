import { useEffect, useState } from "react";

/** The time, renewed every minute: "Today 14:32" becomes "Yesterday" at midnight on a page left open. */
export function useNow(): Date {
  const [now, setNow] = useState(() => new Date());
  useEffect(() => {
    const timer = setInterval(() => setNow(new Date()), 60_000);
    return () => clearInterval(timer);
  }, []);
  return now;
}

import { Outlet } from "react-router-dom";
import { ToastProvider } from "#src/components/ui/toast.tsx";
import { ConnectionBanner } from "./connection-banner.tsx";

export const Root = () => (
  <ToastProvider>
    <ConnectionBanner />
    <Outlet />
  </ToastProvider>
);

import { useSignOut } from "#src/api/session/sign-out.ts";
import { failureText } from "#src/components/ui/query-error.tsx";
import { useToast } from "#src/components/ui/toast.tsx";
import { paths } from "./paths.ts";

/** Signs out and leaves by a full load, so that nothing of this person stays in memory. */
export function useLeave(): () => void {
  const signOut = useSignOut();
  const toast = useToast();
  return () => {
    // The menu that asked is gone when the answer comes, and callbacks given to mutate() would be gone with it.
    signOut.mutateAsync().then(
      () => location.assign(paths.signIn()),
      (error) => toast({ text: `You are still signed in. ${failureText(error)}` }),
    );
  };
}

import { useMutation } from "@tanstack/react-query";
import { apiPaths } from "#shared/api/paths.ts";
import { request } from "../client.ts";

const signOut = () => request(apiPaths.session(), null, { method: "DELETE", anonymous: true });

/** The page leaves by a full load afterwards: nothing of this person stays in memory. */
export const useSignOut = () => useMutation({ mutationFn: signOut });

import { useMutation, useQueryClient } from "@tanstack/react-query";
import { apiPaths } from "#shared/api/paths.ts";
import { type SignInRequest, sessionResponse } from "#shared/api/session.ts";
import { request } from "../client.ts";
import { sessionOptions } from "./get-session.ts";

const signIn = (body: SignInRequest) => request(apiPaths.session(), sessionResponse, { method: "POST", body, anonymous: true });

export function useSignIn() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: signIn,
    onSuccess: (session) => client.setQueryData(sessionOptions().queryKey, session),
  });
}

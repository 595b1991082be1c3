import { createServer } from "node:net";

const HOST = "127.0.0.1";

/** The port itself when it can be listened on, null when it is taken; 0 asks for any free one. */
function tryPort(port) {
  return new Promise((resolve, reject) => {
    const server = createServer();
    server.once("error", (error) => (error.code === "EADDRINUSE" || error.code === "EACCES" ? resolve(null) : reject(error)));
    server.listen({ port, host: HOST, exclusive: true }, () => {
      const { port: got } = server.address();
      server.close(() => resolve(got));
    });
  });
}

export const freePort = () => tryPort(0);

/** The wanted port, or the next free one after it. */
export async function portFrom(wanted) {
  for (let port = wanted; port < wanted + 50 && port < 65536; port++) {
    if (await tryPort(port)) return port;
  }
  return freePort();
}

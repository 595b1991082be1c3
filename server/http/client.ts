/** The built client: hashed assets that never change, and one page for every address that is not the API's. */
import { createHash } from "node:crypto";
import { existsSync, readFileSync } from "node:fs";
import { join } from "node:path";
import express, { type RequestHandler, type Router } from "express";
import helmet from "helmet";

/** Inline scripts of the built page, as the content security policy names them. */
function inlineScriptHashes(page: string): string[] {
  const scripts = page.matchAll(/<script(?![^>]*\ssrc=)[^>]*>([\s\S]*?)<\/script>/gi);
  return [...scripts].map(([, source]) => `'sha256-${createHash("sha256").update(source).digest("base64")}'`);
}

interface Policy {
  scripts: string[];
  connections: string[];
}

export function securityHeaders({ scripts, connections }: Policy): RequestHandler {
  return helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: ["'self'"],
        scriptSrc: ["'self'", ...scripts],
        workerSrc: ["'self'", "blob:"],
        // Component libraries set styles on elements; no style is ever taken from what a user typed.
        styleSrc: ["'self'", "'unsafe-inline'"],
        imgSrc: ["'self'", "data:", "blob:"],
        fontSrc: ["'self'", "data:"],
        connectSrc: ["'self'", ...connections],
        objectSrc: ["'none'"],
        baseUri: ["'self'"],
        formAction: ["'self'"],
        frameAncestors: ["'none'"],
      },
    },
    // The product is served on loopback without TLS.
    strictTransportSecurity: false,
    referrerPolicy: { policy: "same-origin" },
  });
}

const pageFile = (directory: string) => join(directory, "index.html");

export function builtPolicy(directory: string): Policy {
  const page = existsSync(pageFile(directory)) ? readFileSync(pageFile(directory), "utf8") : "";
  return { scripts: inlineScriptHashes(page), connections: [] };
}

export function builtClient(directory: string): Router {
  const router = express.Router();
  router.use("/assets", express.static(join(directory, "assets"), { immutable: true, maxAge: "1y", index: false, fallthrough: false }));
  router.use(express.static(directory, { index: false, maxAge: 0 }));
  router.get("/{*path}", (_request, response, next) => {
    if (!existsSync(pageFile(directory))) {
      response.status(503).type("text").send("The page has not been built yet. Stop the server and run: npm start\n");
      return;
    }
    response.setHeader("Cache-Control", "no-cache");
    response.sendFile(pageFile(directory), (error) => error && next(error));
  });
  return router;
}

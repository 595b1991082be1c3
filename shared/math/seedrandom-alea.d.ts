/** The generator alone; the package's main file pulls in parts that need Node or a browser. */
declare module "seedrandom/lib/alea.js" {
  export default function alea(seed: string): { (): number; quick(): number };
}

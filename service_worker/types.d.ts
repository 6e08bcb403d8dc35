// The build writes precache.js into the site.
declare module "*/precache.js" {
  export const BUILD: string;
  export const FILES: [path: string, sha256: string, bytes: number][];
}

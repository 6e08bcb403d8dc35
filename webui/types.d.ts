// The build copies idb to page/vendor/; its types stay in the package.
declare module "*/vendor/idb.js" {
  export * from "idb";
}

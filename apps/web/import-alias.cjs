const path = require("node:path");

/** What `@/` stands for in this app, for tools that do not read tsconfig.json's `paths`. */
module.exports = { resolve: { alias: { "@": path.join(__dirname, "src") } } };

import type { Config } from "@react-router/dev/config";

export default {
  ssr: true,
  // Each state of the source is built beside the others: a running shop keeps its files (scripts/lib/source.mjs).
  buildDirectory: process.env.BUILD_DIRECTORY || "build",
  future: {
    v8_middleware: true,
    v8_splitRouteModules: true,
    v8_viteEnvironmentApi: true,
    v8_passThroughRequests: true,
    v8_trailingSlashAwareDataRequests: true,
  },
} satisfies Config;

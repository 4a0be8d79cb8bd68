import type { Config } from "@react-router/dev/config";

export default {
  appDirectory: "app",
  // `npm start` builds aside and puts the whole build in place, so that a running server never meets half of it.
  buildDirectory: process.env.BUILD_FOLDER ?? "build",
  ssr: true,
  future: {
    // Guards live in middleware: layout loaders can be skipped by a client navigation.
    v8_middleware: true,
    v8_splitRouteModules: true,
    v8_viteEnvironmentApi: true,
  },
} satisfies Config;

import tailwindcss from "@tailwindcss/vite";
import react from "@vitejs/plugin-react";
import { fileURLToPath } from "node:url";
import { defineConfig } from "vite";

const at = (path: string) => fileURLToPath(new URL(path, import.meta.url));

export default defineConfig({
  plugins: [react(), tailwindcss()],
  resolve: { alias: { "@shared": at("./shared"), "@": at("./src") } },
  worker: { format: "es" },
  build: {
    outDir: "dist/client",
    // The content security policy allows no inline script or data: script, and fonts come from our own origin.
    assetsInlineLimit: 0,
    sourcemap: true,
  },
  server: {
    host: "127.0.0.1",
    port: Number(process.env.VITE_PORT ?? 4311),
    proxy: { "/api": { target: `http://127.0.0.1:${process.env.PORT ?? 4310}`, changeOrigin: false } },
  },
});

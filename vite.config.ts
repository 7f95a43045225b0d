/// <reference types="vitest/config" />
import tailwindcss from '@tailwindcss/vite';
import react from '@vitejs/plugin-react';
import { defineConfig } from 'vite';

export default defineConfig({
  plugins: [react(), tailwindcss()],
  publicDir: 'src/static',
  server: { watch: { ignored: ['**/data/**', '**/dist/**', '**/test-results/**'] } },
  build: {
    outDir: 'dist',
    sourcemap: true,
    // Fonts and icons stay files: the Content-Security-Policy refuses data: fonts.
    assetsInlineLimit: 0,
    rolldownOptions: {
      output: {
        codeSplitting: {
          groups: [
            { name: 'map', priority: 1, test: /node_modules[\\/](leaflet|react-leaflet|@react-leaflet)[\\/]/ },
            { name: 'react', priority: 2, test: /node_modules[\\/](react|react-dom|scheduler|react-router|react-router-dom|@tanstack)[\\/]/ },
          ],
        },
      },
    },
  },
  test: {
    projects: [
      {
        extends: true,
        test: { name: 'node', environment: 'node', setupFiles: ['tests/helpers/fixed-seed.ts'], include: ['{server,shared,tiles,tests}/**/*.test.ts', 'src/**/*.test.ts'], testTimeout: 60_000, hookTimeout: 120_000 },
      },
      { extends: true, test: { name: 'browser parts', environment: 'jsdom', include: ['src/**/*.test.tsx'], setupFiles: ['src/lib/test-setup.ts', 'tests/helpers/fixed-seed.ts'] } },
    ],
  },
});

// @ts-check
import process from 'node:process';
import { defineConfig } from 'astro/config';
import react from '@astrojs/react';
import tailwind from '@astrojs/tailwind';
import { apart } from './src/server/apart.ts';
import { bundles } from './src/server/bundles.ts';
import host from './src/server/host.ts';
import { language } from './src/server/language.ts';

export default defineConfig({
  output: 'server',
  // the middleware checks the origin of every unsafe request itself, JSON included
  security: { checkOrigin: false, allowedDomains: [{}] },
  adapter: host(),
  integrations: [react(), tailwind({ applyBaseStyles: false })],
  server: { host: process.env.HOST || '127.0.0.1', port: Number(process.env.PORT || 4321) },
  devToolbar: { enabled: false },
  // scripts are files: the browser runs no inline one but those that server/http/inline-scripts names
  vite: {
    plugins: [apart(), bundles(), language(process.env.WAKELINE_LANGUAGE)],
    build: { assetsInlineLimit: 0, target: 'es2022' },
    ssr: { noExternal: ['echarts-for-react'] },
  },
});

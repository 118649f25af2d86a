import node from '@astrojs/node';
import react from '@astrojs/react';
import tailwindcss from '@tailwindcss/vite';
import { defineConfig, passthroughImageService } from 'astro/config';

export default defineConfig({
  output: 'server',
  adapter: node({ mode: 'middleware' }),
  integrations: [react()],
  // The start script builds into a folder named after the sources' hash.
  outDir: process.env.RIGWRIGHT_OUT ?? '.build/dev',
  trailingSlash: 'never',
  image: { service: passthroughImageService() },
  // Each door checks Origin itself, of JSON too; Astro's check would refuse a script's multipart form, which has none.
  security: { checkOrigin: false, allowedDomains: [{}] },
  devToolbar: { enabled: false },
  experimental: {
    csp: {
      directives: [
        "default-src 'self'",
        "img-src 'self' data:",
        "font-src 'self'",
        "connect-src 'self'",
        "object-src 'none'",
        "base-uri 'none'",
        "frame-ancestors 'none'",
      ],
    },
  },
  vite: {
    plugins: [tailwindcss()],
    ssr: { external: ['@node-rs/argon2'] },
  },
});

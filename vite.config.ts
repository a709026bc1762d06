import { sveltekit } from '@sveltejs/kit/vite';
import tailwindcss from '@tailwindcss/vite';
import { defineConfig } from 'vite';

export default defineConfig({
  plugins: [tailwindcss(), sveltekit()],
  // Inlined fonts would be blocked by the content security policy.
  build: { assetsInlineLimit: 0 },
  ssr: { external: ['cephes', 'sequelize', 'pg', 'pg-copy-streams', 'exceljs', '@node-rs/argon2'] }
});

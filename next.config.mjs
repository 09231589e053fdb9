/** @type {import('next').NextConfig} */
const config = {
  // The tests build beside a running product, in a folder of their own.
  distDir: process.env.NEXT_DIST_DIR ?? '.next',
  poweredByHeader: false,
  reactStrictMode: true,
  // These load native code or read their own files at run time, so they must not be bundled.
  serverExternalPackages: ['sequelize', 'mariadb', 'piscina', 'umzug', 'sharp', 'pino', '@node-rs/argon2'],
  typescript: { ignoreBuildErrors: true }, // types are checked by `npm run check`, once, for the whole tree
};
export default config;

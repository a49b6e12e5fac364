/** @type {import('next').NextConfig} */
const config = {
  // Another build folder lets a test build and a running server live side by side.
  distDir: process.env.WITNESSMARK_BUILD ?? '.next',
  serverExternalPackages: ['sequelize', 'sqlite3', 'argon2', 'sharp', 'heic-decode', 'nodemailer'],
  // The optimiser would parse untrusted images; pictures are made at upload instead.
  images: { unoptimized: true },
  // `npm run check` checks the types of everything, tests and scripts too; a start need not wait for it again.
  typescript: { ignoreBuildErrors: true },
  // Writing the cache takes longer than the seconds it saves a second build.
  experimental: { turbopackFileSystemCacheForBuild: false },
  poweredByHeader: false,
  devIndicators: false,
  reactStrictMode: true,
};

export default config;

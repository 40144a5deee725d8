import type { MetadataRoute } from 'next';

/** Published reports may be found; a shop's own rooms have nothing for a search engine. */
export default function robots(): MetadataRoute.Robots {
  return { rules: { userAgent: '*', allow: ['/$', '/r/'], disallow: '/' } };
}

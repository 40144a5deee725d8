import type { ReportContent } from '@/lib/shared/report';
import { ReportPage, type ReportStanding } from './report-page';

/** The whole HTML document: head with what search engines and messengers show, the stylesheet set in, the page. */
export function ReportDocument({
  content,
  standing,
  css,
  origin,
}: {
  content: ReportContent;
  standing: ReportStanding;
  css: string;
  /** Where the site is reached, without a slash at its end. */
  origin: string;
}) {
  const url = `${origin}/r/${content.slug}`;
  const name = `${content.unit.maker} ${content.unit.model}`;
  const title = `${name}, grade ${content.grade.letter}: test report ${content.unit.tag}`;
  const picture = content.pictures[0];
  return (
    <html lang="en">
      <head>
        <meta charSet="utf-8" />
        <meta name="viewport" content="width=device-width, initial-scale=1" />
        <title>{title}</title>
        <meta name="description" content={`${content.headline}. ${content.summary}`} />
        <link rel="canonical" href={url} />
        <link rel="icon" href="/icon.svg" type="image/svg+xml" />
        <link
          rel="preload"
          href="/fonts/archivo-latin-5.3.0.woff2"
          as="font"
          type="font/woff2"
          crossOrigin="anonymous"
        />
        <meta property="og:type" content="article" />
        <meta property="og:site_name" content="Mendlight" />
        <meta property="og:title" content={title} />
        <meta property="og:description" content={content.headline} />
        <meta property="og:url" content={url} />
        {picture ? (
          <>
            <meta property="og:image" content={`${url}/pictures/${picture.name}`} />
            <meta property="og:image:width" content={String(picture.width)} />
            <meta property="og:image:height" content={String(picture.height)} />
            <meta property="og:image:alt" content={picture.alt} />
          </>
        ) : null}
        <script type="application/ld+json">{linkedData(content, url)}</script>
        {standing.withdrawn ? <meta name="robots" content="noindex" /> : null}
        {/* Our own compiled stylesheet: nothing of a report ever reaches it. */}
        <style>{css}</style>
      </head>
      <body>
        <ReportPage content={content} standing={standing} />
      </body>
    </html>
  );
}

/** What a search engine may know: schema.org's words for a mended camera and the shop's judgement of it. */
function linkedData(
  { unit, grade, headline, summary, publishedAt, shop }: ReportContent,
  url: string,
) {
  // An escaped bracket can't end the script element, whatever a shop typed.
  return JSON.stringify({
    '@context': 'https://schema.org',
    '@type': 'Product',
    name: `${unit.maker} ${unit.model}`,
    brand: { '@type': 'Brand', name: unit.maker },
    model: unit.model,
    itemCondition: 'https://schema.org/RefurbishedCondition',
    url,
    review: {
      '@type': 'Review',
      name: `Grade ${grade.letter}: ${headline}`,
      reviewBody: summary,
      datePublished: publishedAt,
      author: { '@type': 'Organization', name: shop.name },
    },
  }).replaceAll('<', '\\u003c');
}

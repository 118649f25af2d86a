/** One picture of a page. */
export interface Shot {
  file: string;
  name: string;
  path: string;
  viewer: string;
  width: number;
  theme: 'light' | 'dark';
}

function escapeHtml(text: string): string {
  return text.replaceAll('&', '&amp;').replaceAll('<', '&lt;').replaceAll('"', '&quot;');
}

/** A page that shows all pictures, by page and by who sees it. */
export function writeIndex(shots: readonly Shot[]): string {
  const names = [...new Set(shots.map(({ name }) => name))];
  const sections = names.map((name) => {
    const own = shots.filter((shot) => shot.name === name);
    const figures = own.map(
      ({ file, viewer, width, theme }) =>
        `<figure><a href="${escapeHtml(file)}"><img src="${escapeHtml(file)}" alt="" loading="lazy"></a>` +
        `<figcaption>${escapeHtml(viewer)}, ${width} px, ${theme}</figcaption></figure>`,
    );
    const heading = `<h2 id="${escapeHtml(name)}">${escapeHtml(name)} <code>${escapeHtml(own[0]?.path ?? '')}</code></h2>`;
    return `<section>${heading}<div>${figures.join('\n')}</div></section>`;
  });
  const links = names.map((name) => `<a href="#${escapeHtml(name)}">${escapeHtml(name)}</a>`);
  return `<!doctype html>
<html lang="en">
<meta charset="utf-8">
<title>Pictures of every page</title>
<style>
body { font: 16px/1.4 sans-serif; margin: 2rem; }
nav { display: flex; flex-wrap: wrap; gap: 0.25rem 1rem; }
section > div { display: flex; flex-wrap: wrap; gap: 1rem; align-items: start; }
figure { margin: 0; }
img { width: 20rem; border: 1px solid #999; }
</style>
<h1>Pictures of every page</h1>
<nav>${links.join('\n')}</nav>
${sections.join('\n')}
</html>
`;
}

import { cleanup, render, screen } from '@testing-library/react';
import { afterEach, describe, expect, it } from 'vitest';
import { Markdown } from '../../../app/components/ui/markdown';

afterEach(cleanup);

const hostile = [
  'Text <script>window.stolen = 1</script> <img src=x onerror="window.stolen = 1">',
  '[link](javascript:alert(1)) and [good](https://example.org/)',
  '![image](data:text/html;base64,PHNjcmlwdD4=)',
  '<a href="https://example.org" style="position:fixed" onclick="x()">raw</a>',
  '$\\href{javascript:alert(1)}{x}$ and $\\includegraphics{https://example.org/x.png}$',
].join('\n\n');

describe('Markdown', () => {
  it('draws formulas', async () => {
    const { container } = render(<Markdown source={'The error is $E = \\|x - x_0\\|$ and\n\n$$\n\\frac{a}{b}\n$$'} />);
    await screen.findByText(/The error is/);
    await expect.poll(() => container.querySelectorAll('.katex').length).toBe(2);
    expect(container.querySelectorAll('.katex-display')).toHaveLength(1);
  });

  it('lets nothing run and nothing load', async () => {
    const { container } = render(<Markdown source={hostile} />);
    await screen.findByRole('link', { name: 'good' });
    expect(container.querySelector('script, style, iframe, object, [onerror], [onclick]')).toBeNull();
    for (const link of container.querySelectorAll('a')) expect(link.getAttribute('href') ?? '').not.toMatch(/^\s*javascript:/i);
    for (const image of container.querySelectorAll('img')) expect(image.getAttribute('src') ?? '').not.toMatch(/^(data:|javascript:|x$)/i);
  });

  it('keeps one h1 for the page: headings of the text start at h3', async () => {
    const { container } = render(<Markdown source={'# Title\n\nbody'} />);
    await screen.findByRole('heading', { level: 3, name: 'Title' });
    expect(container.querySelector('h1, h2')).toBeNull();
  });
});

/** What hostile notes become; the strings are after OWASP, XSS Filter Evasion Cheat Sheet. */
import { describe, expect, it } from 'vitest';
import { renderNote } from './note-text';

const id = '11111111-1111-4111-8111-111111111111';
const people = [{ id, name: '<b>Ines</b>' }];
const render = (text: string) => renderNote(text, people);

describe('a note', () => {
  it('has emphasis, lists, code, quotes and links', () => {
    expect(render('**up** `E`\n\n- a\n- b\n\n> q')).toMatch(
      /<strong>up<\/strong> <code>E<\/code>[\s\S]*<ul>[\s\S]*<blockquote>/,
    );
    expect(render('[paper](https://papers.example/1)')).toContain(
      '<a href="https://papers.example/1" rel="nofollow noopener noreferrer">paper</a>',
    );
    expect(render('https://papers.example')).toContain('rel="nofollow noopener noreferrer"');
    expect(render('[here](/search?text=a)')).toContain('href="/search?text=a"');
  });

  it('names people by their present name, escaped', () => {
    expect(render(`see @{${id}}!`)).toContain(
      '<span class="mention">@&lt;b&gt;Ines&lt;/b&gt;</span>',
    );
    expect(render('@{22222222-2222-4222-8222-222222222222}')).toContain('@a former member');
    expect(render(`\`@{${id}}\``)).not.toContain('class="mention"');
  });

  it('lets no HTML and no script through', () => {
    const hostile = [
      '<script>alert(1)</script>',
      '<img src=x onerror=alert(1)>',
      '[a](javascript:alert(1))',
      '[a](JaVaScRiPt:alert(1))',
      '[a](java&#10;script:alert(1))',
      '[a](&#106;avascript:alert(1))',
      '[a](data:text/html;base64,PHNjcmlwdD4=)',
      '[a](vbscript:x)',
      '[a](//evil.example)',
      '[a](/\\evil.example)',
      '<javascript:alert(1)>',
      '![a](https://evil.example/track.png)',
      '[a](https://x.example "onmouseover=alert(1)")',
      '[a](https://x.example"onmouseover="alert(1))',
      '<svg/onload=alert(1)>',
      '# heading',
      '[a]: javascript:alert(1)\n\n[a]',
      '`</code><script>alert(1)</script>`',
      '```"><script>alert(1)</script>\nx\n```',
    ];
    for (const text of hostile) {
      const html = render(text);
      expect(html, text).not.toMatch(/<(script|img|svg|iframe|h\d|style|object)/i);
      // Every tag there is, with its attributes: only those that a note may have.
      for (const [tag] of html.matchAll(/<[^>]*>/g)) {
        expect(tag, text).toMatch(
          /^<\/?(p|br|strong|em|s|ul|ol|li|code|pre|blockquote|span|a)( (class|start)="[^"]*"| href="(https?:\/\/|mailto:|\/[^/\\]|#)[^"]*"| title="[^"]*"| rel="nofollow noopener noreferrer")*>$/,
        );
      }
    }
  });
});

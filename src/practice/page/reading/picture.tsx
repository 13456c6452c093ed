/** A picture, its full size on a press, and what it says in words under a disclosure. */
import { useLooking } from '../context.ts';

export function Picture({ url, alt, title }: { url: string; alt: string; title: string }) {
  const { enlarge } = useLooking();
  return (
    <figure class="picture">
      <button
        type="button"
        class="bare"
        aria-label={`Full size: ${title || 'picture'}`}
        onClick={() => enlarge({ url, alt, title })}
      >
        <img src={url} alt={alt} loading="lazy" />
      </button>
      {title ? <figcaption>{title}</figcaption> : null}
      {alt ? (
        <details>
          <summary>What this picture says</summary>
          <p>{alt}</p>
        </details>
      ) : null}
    </figure>
  );
}

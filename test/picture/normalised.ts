/** The drawing with digits limited and ids counted anew, so that only a visible change changes the text. */
export function normalised(svg: string): string {
  const ids = new Map<string, string>();
  return (
    svg
      .replace(/gradient_\d+/g, (id) => {
        if (!ids.has(id)) ids.set(id, `gradient-${ids.size + 1}`);
        return ids.get(id) ?? id;
      })
      .replace(/-?\d+\.\d{2,}/g, (digits) => String(Number(Number(digits).toFixed(1))))
      // A layer's number changes with every layer put below it.
      .replace(/ layer_\d+_[a-z]+/g, '')
      .replaceAll('><', '>\n<')
  );
}

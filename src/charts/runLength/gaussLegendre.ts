export interface Quadrature {
  readonly nodes: Float64Array;
  readonly weights: Float64Array;
}

/**
 * Nodes and weights of the Gauss-Legendre rule on an interval: the weighted sum of a polynomial of degree below 2 count is its integral.
 * @param count      number of nodes, >= 1
 * @param low, high  ends of the interval
 * Method: Newton's method on the Legendre polynomial, from the usual cosine guess.
 * Source: Abramowitz and Stegun 1964, Handbook of Mathematical Functions, 25.4.29 (number from memory).
 */
export function gaussLegendre(count: number, low: number, high: number): Quadrature {
  const nodes = new Float64Array(count);
  const weights = new Float64Array(count);
  const middle = (low + high) / 2;
  const half = (high - low) / 2;
  for (let i = 0; i < Math.ceil(count / 2); i++) {
    let x = Math.cos((Math.PI * (i + 0.75)) / (count + 0.5));
    let slope = 0;
    for (let step = 0; step < 50; step++) {
      let value = 1;
      let before = 0;
      for (let k = 1; k <= count; k++) [before, value] = [value, ((2 * k - 1) * x * value - (k - 1) * before) / k];
      slope = (count * (x * value - before)) / (x * x - 1);
      const move = value / slope;
      x -= move;
      if (Math.abs(move) < 1e-15) break;
    }
    const weight = (2 * half) / ((1 - x * x) * slope * slope);
    nodes[i] = middle - half * x;
    nodes[count - 1 - i] = middle + half * x;
    weights[i] = weight;
    weights[count - 1 - i] = weight;
  }
  return { nodes, weights };
}

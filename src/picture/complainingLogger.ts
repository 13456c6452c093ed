/** A logger for Vega and Vega-Lite that takes every warning for an error: a warning would mean a part of the drawing is missing. */
export function complainingLogger() {
  const complain = (...parts: readonly unknown[]): never => {
    throw new Error(`drawing the picture: ${parts.map(String).join(' ')}`);
  };
  const logger = {
    level: () => logger,
    error: complain,
    warn: complain,
    info: () => logger,
    debug: () => logger,
  };
  return logger as never;
}

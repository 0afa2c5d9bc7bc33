import type { ShapeFit } from '~/advice/shape-fit';
import { Estimate } from '../estimate';
import { formatFixed } from '~/format/number';

/** A fitted shape or slope with its interval and n, or why there is none. */
export function ShapeEstimate({ fit }: { fit: ShapeFit }) {
  if (fit.kind === 'cannot-be-estimated') return <>cannot be estimated: {fit.reason}</>;
  return (
    <Estimate
      value={fit.shape}
      low={fit.shapeInterval.low}
      high={fit.shapeInterval.high}
      n={fit.failures}
      format={(value) => formatFixed(value, 2)}
    />
  );
}

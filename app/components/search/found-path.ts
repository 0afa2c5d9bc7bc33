import { href } from 'react-router';

/** Where something that was found leads: a class to its page, an asset to what can be logged of it. */
export function foundPath({ kind, id }: { kind: 'class' | 'asset'; id: string }): string {
  return kind === 'class'
    ? href('/classes/:classId', { classId: id })
    : href('/assets/:assetId', { assetId: id });
}

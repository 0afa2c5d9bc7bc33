import { href, Link } from 'react-router';

import { formatCalendarDate } from '~/format/date';
import { placeWords } from './words';

interface ListedAsset {
  id: string;
  tag: string;
  quantity: number;
  className: string;
  siteName: string;
  areaName: string | null;
  retiredOn: string | null;
}

/** Assets to pick from, each a row as wide as the screen that opens its form. */
export function AssetList({ assets }: { assets: readonly ListedAsset[] }) {
  return (
    <ul className="border-hair border-t">
      {assets.map((asset) => (
        <li key={asset.id} className="border-hair border-b">
          <Link
            to={href('/log/:assetId', { assetId: asset.id })}
            className="hover:bg-pick flex min-h-14 flex-col justify-center py-2 no-underline"
          >
            <span className="text-[1.1rem] font-bold [overflow-wrap:anywhere]">
              {asset.tag}
              {asset.quantity > 1 && <span className="text-grey font-normal"> × {asset.quantity}</span>}
            </span>
            <span className="text-grey text-[0.9rem]">
              {asset.className}, {placeWords(asset)}
              {asset.retiredOn !== null && `, retired on ${formatCalendarDate(asset.retiredOn)}`}
            </span>
          </Link>
        </li>
      ))}
    </ul>
  );
}

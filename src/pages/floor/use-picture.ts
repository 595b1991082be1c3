import { useEffect, useState } from "react";

export interface PictureFile {
  url: string;
  widthPx: number;
  heightPx: number;
}

/** A picture once its size is known; `missing` when it cannot be fetched. */
export function usePictureFile(url: string | null): { file: PictureFile | null; missing: boolean } {
  const [state, setState] = useState<{ file: PictureFile | null; missing: boolean; url: string | null }>({ file: null, missing: false, url: null });
  useEffect(() => {
    if (!url) return;
    const image = new Image();
    image.onload = () => setState({ url, missing: false, file: { url, widthPx: image.naturalWidth, heightPx: image.naturalHeight } });
    image.onerror = () => setState({ url, missing: true, file: null });
    image.src = url;
    return () => {
      image.onload = null;
      image.onerror = null;
    };
  }, [url]);
  return state.url === url ? { file: state.file, missing: state.missing } : { file: null, missing: false };
}

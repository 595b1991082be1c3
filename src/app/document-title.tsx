/** React moves it into the head; the deepest page that names itself wins. */
export const DocumentTitle = ({ children }: { children: string }) => <title>{`${children} · Holdfast`}</title>;

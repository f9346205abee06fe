/** The shape of a page while its first piece of code arrives: no words, since their language may not be here yet. */
export function PageSkeleton() {
  return (
    <div className="page-gutter pt-6" aria-busy="true">
      <div className="h-4 w-28 bg-well" />
      <div className="mt-3 h-14 w-56 bg-well" />
      <div className="mt-6 h-2 w-full bg-well" />
      <div className="mt-12 flex flex-col gap-px">
        {[1, 2, 3, 4].map((row) => (
          <div key={row} className="h-14 border-t border-rule" />
        ))}
      </div>
    </div>
  );
}

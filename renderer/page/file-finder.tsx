import { useCallback, useLayoutEffect, useRef, useState } from 'react';
import type { Output } from '../../main/contract/contract.ts';
import { Problem } from '../../solver/problem/problem.ts';
import { useStore } from '../state/store.ts';
import type { FileWish } from '../state/view.ts';
import { usePage } from './context.tsx';

type Listing = Output<'files.list'>;

/** The page's own way through folders, where the system offers none. */
export function FileFinder() {
  const { desk } = usePage();
  const wish = useStore(desk.view, (view) => view.files);
  return wish ? <Finder wish={wish} /> : null;
}

function Finder({ wish }: { readonly wish: FileWish }) {
  const { desk } = usePage();
  const dialog = useRef<HTMLDialogElement>(null);
  const [listing, setListing] = useState<Listing | null>(null);
  const [name, setName] = useState(wish.suggest ?? '');
  const [says, setSays] = useState('');
  const go = useCallback(
    async (folder?: string): Promise<void> => {
      try {
        setListing(await desk.client.call('files.list', folder === undefined ? {} : { folder }));
        setSays('');
      } catch (error) {
        setSays(error instanceof Problem ? `${error.what} ${error.remedy}` : 'This folder cannot be read.');
      }
    },
    [desk],
  );
  // open as soon as it is there: keys go by that
  useLayoutEffect(() => {
    dialog.current?.showModal();
    void go();
  }, [go]);
  const fits = (file: string): boolean =>
    wish.extensions.some((extension) => file.toLowerCase().endsWith(`.${extension}`));
  const there = listing?.entries.some((entry) => entry.name === name);
  const accept = (): void => {
    if (!listing || name.trim() === '') {
      setSays('Give the file a name.');
      return;
    }
    const full = fits(name) || wish.purpose === 'open' ? name : `${name}.${wish.extensions[0]}`;
    const separator = listing.folder.includes('\\') ? '\\' : '/';
    wish.done(`${listing.folder.replace(/[\\/]$/, '')}${separator}${full}`);
  };
  return (
    <dialog ref={dialog} className="finder files" aria-label={wish.title} onClose={() => wish.done(null)}>
      <h2>{wish.title}</h2>
      <p className="soft path">{listing?.folder ?? ' '}</p>
      <ul aria-label="Files and folders">
        {listing?.parent && (
          <li>
            <button type="button" onClick={() => go(listing.parent!)}>
              Up one folder
            </button>
          </li>
        )}
        {listing?.entries
          .filter((entry) => entry.kind === 'folder' || fits(entry.name))
          .map((entry) => (
            <li key={entry.path}>
              <button
                type="button"
                onClick={() => {
                  if (entry.kind === 'folder') void go(entry.path);
                  else if (wish.purpose === 'open') wish.done(entry.path);
                  else setName(entry.name);
                }}
              >
                {entry.name}
                {entry.kind === 'folder' && <span className="soft"> · folder</span>}
              </button>
            </li>
          ))}
        {listing?.more && <li className="soft">There is more here than is shown.</li>}
      </ul>
      {says && (
        <p className="fault" role="alert">
          {says}
        </p>
      )}
      <div className="row">
        {wish.purpose === 'save' && (
          <input
            aria-label="File name"
            value={name}
            onChange={(event) => setName(event.target.value)}
            onKeyDown={(event) => event.key === 'Enter' && accept()}
          />
        )}
        {wish.purpose === 'save' && (
          <button type="button" className="strong-button" onClick={accept}>
            {there ? 'Put in its place' : 'Keep here'}
          </button>
        )}
        <button type="button" className="plain-button" onClick={() => wish.done(null)}>
          Cancel
        </button>
      </div>
    </dialog>
  );
}

import { createRoot } from 'react-dom/client';
import { VerifyTool } from '../verify-tool';
import { loadInlinedChecker, programHash, version } from './load-inlined-checker';

/** What `verify.html` shows: the same check as on a served page, and where this copy came from. */
function StandalonePage() {
  return (
    <>
      <header className="not-printed bg-spine text-spine-ink">
        <p className="mx-auto max-w-[72rem] px-4 py-3 font-condensed text-xl font-semibold md:px-9">
          Witnessmark: check a packet
        </p>
      </header>
      <main className="mx-auto max-w-[72rem] px-4 pt-8 pb-16 md:px-9">
        <h1 className="not-printed">Check a packet</h1>
        <div className="tag not-printed mt-1 mb-5 grid max-w-[70ch] gap-2">
          <p>
            The check runs in this browser. This page has no network: its policy forbids it to reach anything, and the
            file is sent nowhere.
          </p>
          <p>
            This copy is worth as much as the place you took it from. Compare its SHA-256 with one you got another way,
            such as the method page of another installation. On Windows:{' '}
            <code className="font-mono text-sm">certutil -hashfile verify.html SHA256</code>; on a Mac:{' '}
            <code className="font-mono text-sm">shasum -a 256 verify.html</code>; on Linux:{' '}
            <code className="font-mono text-sm">sha256sum verify.html</code>.
          </p>
        </div>
        <h1 className="hidden print:block">Report of a check</h1>
        <VerifyTool
          load={loadInlinedChecker}
          published="not-asked"
          checkedWith={{ kind: 'file', program: programHash, version }}
        />
      </main>
    </>
  );
}

const root = document.getElementById('root');
if (root !== null) createRoot(root).render(<StandalonePage />);

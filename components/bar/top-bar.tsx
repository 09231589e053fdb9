'use client';

import Link from 'next/link';
import { usePathname } from 'next/navigation';
import { signOut } from 'next-auth/react';
import { Logo } from '@/components/figures/logo';
import { Chevron } from '@/components/ui/icons';
import { Menu } from '@/components/ui/menu';
import { callAction } from '@/lib/client/call-action';
import type { ActionAnswer } from '@/lib/domain/errors';
import { ROLE_WORDS } from '@/lib/domain/roles';
import type { BenchChoice, Me } from '@/lib/domain/views';
import { BenchPicker, type ChooseBench } from './bench-picker';
import { LookSwitches } from './look-switches';
import { AFTER, BEFORE, isAt, menuPlaces, type Place } from './places';

interface Props {
  me: Me;
  benches: BenchChoice[];
  benchInUse: number | null;
  mailPage: boolean;
  chooseBench: ChooseBench;
  signOutEverywhere: () => Promise<ActionAnswer<unknown>>;
}

export function TopBar({ me, benches, benchInUse, mailPage, chooseBench, signOutEverywhere }: Props) {
  const path = usePathname();
  const link = (place: Place) => (
    <Link
      key={place.href}
      className="place"
      href={place.href}
      aria-current={isAt(path, place) ? 'page' : undefined}
    >
      {place.word}
    </Link>
  );
  return (
    <header className="top">
      <div className="top-left">
        <div className="not-phone">
          <BenchPicker benches={benches} inUse={benchInUse} chooseBench={chooseBench} />
        </div>
        <div className="only-phone">
          <PersonMenu me={me} mailPage={mailPage} side="left" signOutEverywhere={signOutEverywhere} />
        </div>
      </div>
      <nav className="places" aria-label="Places">
        <div className="side before">{BEFORE.map(link)}</div>
        <Link className="home" href="/" aria-label="Midfringe, start">
          <Logo label="" />
        </Link>
        <div className="side after">{AFTER.map(link)}</div>
      </nav>
      <div className="top-right">
        <LookSwitches />
        <div className="not-phone">
          <PersonMenu me={me} mailPage={mailPage} side="right" signOutEverywhere={signOutEverywhere} />
        </div>
      </div>
    </header>
  );
}

const leave = () => signOut({ callbackUrl: '/sign-in' });

interface PersonProps {
  me: Me;
  mailPage: boolean;
  signOutEverywhere: Props['signOutEverywhere'];
  /** On the left it is the phone's menu and also holds the six places. */
  side: 'left' | 'right';
}

function PersonMenu({ me, mailPage, side, signOutEverywhere }: PersonProps) {
  const path = usePathname();
  const places =
    side === 'left' ? [...BEFORE, ...AFTER, ...menuPlaces(me, mailPage)] : menuPlaces(me, mailPage);
  return (
    <Menu
      label={`Signed in as ${me.name}. Open the menu`}
      sheetClass={side === 'left' ? 'menu-sheet left' : 'menu-sheet'}
      face={
        <>
          <span>
            <small className={side === 'left' ? 'only-heard' : undefined}>Signed in</small>
            <b>{me.name}</b>
          </span>
          <Chevron />
        </>
      }
    >
      {(close) => (
        <>
          <p className="px-[18px] pt-2 pb-3 text-small text-ink-2">
            {me.roles.map((role) => ROLE_WORDS[role]).join(', ')}
          </p>
          {places.map((place) => (
            <Link
              key={place.href}
              className="menu-item"
              href={place.href}
              onClick={close}
              aria-current={isAt(path, place) ? 'page' : undefined}
            >
              {place.word}
            </Link>
          ))}
          <button type="button" className="menu-item" onClick={() => void leave()}>
            Sign out
          </button>
          <button
            type="button"
            className="menu-item"
            onClick={() => void callAction(signOutEverywhere).then(leave)}
          >
            Sign out everywhere
          </button>
        </>
      )}
    </Menu>
  );
}

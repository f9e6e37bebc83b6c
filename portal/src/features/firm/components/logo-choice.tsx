import { Button, FileButton } from '@mantine/core';
import type { FirmSettings } from '@tallypole/shared/schemas/firms';
import { useState } from 'react';
import { queryClient } from '../../../lib/query-client.ts';
import { ActButton } from '../../../ui/act-button.tsx';
import { FailureState, Section } from '../../../ui/page.tsx';
import { toast } from '../../../ui/toast.ts';
import { logoUrl, removeLogo, sendLogo, settingsQuery } from '../api/settings.ts';
import { strings } from '../strings.ts';
import classes from './firm.module.css';

/** The logo as it stands on papers; what is chosen is sent at once. */
export function LogoChoice({ firmId, logo }: { firmId: string; logo: FirmSettings['logo'] }) {
  const [picked, setPicked] = useState(0);
  const [sending, setSending] = useState(false);
  const [failure, setFailure] = useState<unknown>(null);
  const keep = (settings: FirmSettings) => queryClient.setQueryData(settingsQuery(firmId).queryKey, settings);
  const send = (file: File | null) => {
    // a fresh field, so that the same picture can be chosen again
    setPicked((count) => count + 1);
    if (!file) return;
    setSending(true);
    setFailure(null);
    sendLogo(firmId, file)
      .then(keep, (error: unknown) => setFailure(error))
      .finally(() => setSending(false));
  };
  return (
    <Section title={strings.logo}>
      <div className={classes['logo']}>
        <p className="quiet">{strings.logoExplain}</p>
        {failure === null ? null : <FailureState error={failure} />}
        <div role="status">
          {logo.state === 'none' ? <p>{strings.logoNone}</p> : null}
          {logo.state === 'stored' ? <p>{strings.logoWaits}</p> : null}
          {logo.state === 'unreadable' ? <p>{logo.trouble}</p> : null}
        </div>
        {logo.state === 'ready' ? <img src={logoUrl(firmId, logo.version)} alt={strings.logoAlt} /> : null}
        <div className={classes['acts']}>
          <FileButton key={picked} onChange={send} accept="image/png,image/jpeg">
            {(props) => <Button {...props} variant="outline" loading={sending}>{strings.logoChoose}</Button>}
          </FileButton>
          {logo.state === 'none' ? null : (
            <ActButton
              scope={`logo-remove:${firmId}:${logo.version}`}
              label={strings.logoRemove}
              about={strings.logoAbout}
              variant="subtle"
              send={(key) => removeLogo(firmId, key)}
              onDone={(settings) => {
                keep(settings);
                toast(strings.logoRemoved);
              }}
            />
          )}
        </div>
      </div>
    </Section>
  );
}

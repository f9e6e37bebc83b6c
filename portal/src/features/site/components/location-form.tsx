import { Button } from '@mantine/core';
import { useQueryClient, useSuspenseQuery } from '@tanstack/react-query';
import { SiteLocation } from '@tallypole/shared/schemas/photos';
import { useState } from 'react';
import { z } from 'zod';
import { FieldRow, Form, NumberField, TextField, useActForm } from '../../../ui/forms/index.ts';
import { toast } from '../../../ui/toast.ts';
import { locateSite, siteQuery } from '../api/site-location.ts';
import { strings } from '../strings.ts';
import classes from './site.module.css';

const degrees = (most: number, message: string) => z.string().trim().refine((text) => text !== '' && Math.abs(Number(text)) <= most, message);
const Typed = z.object({ latitude: degrees(90, 'Enter a latitude such as 39.4017.'), longitude: degrees(180, 'Enter a longitude such as -84.5613.'), radiusM: SiteLocation.shape.radiusM });

/** Where the site is, for whoever sets up the job; photos are compared with it. */
export function LocationForm({ jobId }: { jobId: string }) {
  const { data: { location } } = useSuspenseQuery(siteQuery(jobId));
  const queries = useQueryClient();
  const [silent, setSilent] = useState(false);
  const act = useActForm({
    name: `site:${jobId}`,
    initialValues: { latitude: location ? String(location.latitude) : '', longitude: location ? String(location.longitude) : '', radiusM: location?.radiusM ?? 75 },
    schema: Typed,
    send: ({ latitude, longitude, radiusM }, key) => locateSite(jobId, { latitude: Number(latitude), longitude: Number(longitude), radiusM }, key),
    onDone: (site) => {
      queries.setQueryData(siteQuery(jobId).queryKey, site);
      toast(strings.locationSaved);
    },
  });
  const here = () =>
    navigator.geolocation.getCurrentPosition(
      ({ coords }) => act.form.setValues({ latitude: coords.latitude.toFixed(6), longitude: coords.longitude.toFixed(6) }),
      () => setSilent(true),
      { enableHighAccuracy: true, timeout: 15_000 },
    );
  return (
    <details className={classes['fold']}>
      <summary>{strings.locate}</summary>
      <p className="quiet">{location ? strings.located(location.latitude.toFixed(5), location.longitude.toFixed(5), location.radiusM) : strings.notLocated}</p>
      <Form act={act} submitLabel={strings.saveLocation} aside={<Button variant="outline" onClick={here}>{strings.here}</Button>}>
        {silent ? <p role="alert">{strings.hereFails}</p> : null}
        <FieldRow>
          <TextField field={act.field('latitude')} label={strings.latitude} inputMode="decimal" />
          <TextField field={act.field('longitude')} label={strings.longitude} inputMode="decimal" />
          <NumberField field={act.field('radiusM')} label={strings.radius} />
        </FieldRow>
      </Form>
    </details>
  );
}

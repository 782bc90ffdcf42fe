import { useEffect } from 'react';
import { paths } from '../../schemas/paths';

/**
 * Lets the browser keep this page for when there is no network. In development there is no worker: modules there come
 * one by one from the sources. A failure costs only the opening without a network, which the page's head can't know.
 */
export function useCaptureWorker(): void {
  useEffect(() => {
    if (!import.meta.env.PROD || !('serviceWorker' in navigator)) return;
    navigator.serviceWorker.register(paths.captureWorker(), { scope: '/' }).catch((error: unknown) => {
      console.warn('This page cannot be kept for use without a network.', error);
    });
  }, []);
}

import '@testing-library/jest-dom/vitest';
import { cleanup } from '@testing-library/react';
import { afterEach } from 'vitest';

// no globals, so Testing Library doesn't clean up by itself
afterEach(cleanup);

const noMatch = (query: string) => ({ matches: false, media: query, onchange: null, addListener() {}, removeListener() {}, addEventListener() {}, removeEventListener() {}, dispatchEvent: () => false });
Object.defineProperty(window, 'matchMedia', { writable: true, value: noMatch });
window.HTMLElement.prototype.scrollIntoView = () => {};

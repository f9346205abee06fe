import '@testing-library/jest-dom/vitest';
import { configure } from '@testing-library/react';

// A promise of a test is what comes, not how soon: its own time-out ends it on a busy computer.
configure({ asyncUtilTimeout: 15_000 });

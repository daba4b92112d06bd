import { configure } from '@testing-library/react';

// A lazily loaded part (formulas) takes over the library's one second on a busy machine; what is waited for stays the same.
configure({ asyncUtilTimeout: 10_000 });

import { QueryClientProvider } from '@tanstack/react-query';
import { StrictMode } from 'react';
import { RouterProvider } from 'react-router-dom';
import { newQueryClient } from '../lib/query-client.ts';
import { LiveRegions } from '../ui/announce.tsx';
import { newRouter } from './routes.tsx';

const queries = newQueryClient();
const router = newRouter();

export function App() {
  return (
    <StrictMode>
      <QueryClientProvider client={queries}>
        <RouterProvider router={router} />
        <LiveRegions />
      </QueryClientProvider>
    </StrictMode>
  );
}

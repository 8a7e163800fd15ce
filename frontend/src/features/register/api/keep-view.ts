import { useChange } from '../../../lib/query.js';

export const useKeepView = () => useChange('keepView', (view: { name: string; query: string }) => ({ body: view }), ['listViews']);

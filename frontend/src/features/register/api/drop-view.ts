import { useChange } from '../../../lib/query.js';

export const useDropView = () => useChange('dropView', (viewId: string) => ({ params: { viewId } }), ['listViews']);

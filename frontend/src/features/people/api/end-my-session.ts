import { useChange } from '../../../lib/query.js';

export const useEndMySession = () => useChange('endMySession', (sessionId: string) => ({ params: { sessionId } }), ['listMySessions', 'readMe']);

export type { Trade, TradeExposure, TradeInvoice, TradePayment, Waiver, WaiverExposure } from './types.ts';
export { waiverExposure } from './waiver-exposure.ts';

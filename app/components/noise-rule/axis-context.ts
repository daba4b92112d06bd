import { createContext, useContext } from 'react';
import { axisView, type AxisView } from '../../lib/axis-words';

/** The axis of the figures in view; the noise unless a page says otherwise. */
export const AxisContext = createContext<AxisView>(axisView());
export const useAxis = (): AxisView => useContext(AxisContext);

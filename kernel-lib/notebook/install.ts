import { startDisplay } from './display';

/** Imported for its effect: in a kernel, messages are mended and results show themselves; elsewhere nothing happens. */
startDisplay();

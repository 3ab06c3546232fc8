export { Catalogue } from './catalogue/catalogue';
export { type Measured, measured } from './quantity/measured';

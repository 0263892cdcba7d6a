import type { Address } from './use-measurement'

/** Sodium D2 at 0.8 T, six components with invented noise; nobody measured them. */
export const EXAMPLE: Partial<Address> = {
  lines: ['Na-I.1~Na-I.3'],
  p: '588.9737,0.0003;588.9821,0.0003;588.9906,0.0003;588.9991,0.0003;589.0083,0.0003;589.0168,0.0003',
  quantity: 'positions',
  unit: 'nm',
  medium: 'conventional',
  shared: false,
  scale: 'exact',
  scale_unc: '',
  model: 'auto',
  theta: null,
  unknown: 'field',
  show: 'T',
  invented: true,
}

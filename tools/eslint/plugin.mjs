import { explainedAs } from './rules/explained-as.mjs';
import { fileShape } from './rules/file-shape.mjs';
import { layers } from './rules/layers.mjs';
import { noCycles } from './rules/no-cycles.mjs';
import { numericalDocstring } from './rules/numerical-docstring.mjs';
import { sharedPurity } from './rules/shared-purity.mjs';

/** The project's own rules under one name. */
export const sidewashPlugin = {
  meta: { name: 'sidewash' },
  rules: {
    layers,
    'no-cycles': noCycles,
    'shared-purity': sharedPurity,
    'numerical-docstring': numericalDocstring,
    'explained-as': explainedAs,
    'file-shape': fileShape,
  },
};

import type { Definition } from '../../shared/model/virtual.ts';

const words = (quantity: string): string => quantity.replaceAll('-', ' ');

/** How a virtual channel comes from others, in a line. */
export const definitionText = (definition: Definition): string => {
  switch (definition.kind) {
    case 'rosette': {
      const angles = definition.layout === 'rectangular' ? '0/45/90' : '0/60/120';
      return `${words(definition.quantity)} of the ${angles} rosette ${definition.gauges.join(', ')}`;
    }
    case 'section': {
      const gauges = definition.gauges.map(({ channel }) => channel).join(', ');
      return `${words(definition.quantity)} of the section with ${gauges}`;
    }
    case 'mean':
      return `mean of ${definition.of.join(', ')}`;
    case 'difference':
      return definition.of.join(' less ');
    case 'expression': {
      const names = Object.entries(definition.names).map(([name, id]) => `${name} = ${id}`);
      return `${definition.text}, where ${names.join(', ')}`;
    }
  }
};

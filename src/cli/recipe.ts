import { RECIPE_ENTRIES, recipeDocument, recipeJsonSchema, STANDARD_RECIPE, sourceOf } from '../model/recipe.js';
import { type CommonOptions, type ModelOptions, recipeOf } from './choices.js';
import { makeConsole, table } from './console.js';

/** `galewake recipe`: the modelling choices in force. */
export async function recipe(options: CommonOptions & ModelOptions & { schema?: boolean }): Promise<void> {
  const out = makeConsole({ quiet: options.quiet === true });
  if (options.schema) {
    out.print(`${JSON.stringify(recipeJsonSchema(), null, 2)}\n`);
    return;
  }
  const inForce = await recipeOf(options);
  if (options.json) {
    out.print(`${JSON.stringify(recipeDocument(inForce), null, 2)}\n`);
    return;
  }
  const rows = RECIPE_ENTRIES.map((entry) => {
    const value = String(inForce[entry.key]);
    return [
      inForce[entry.key] === STANDARD_RECIPE[entry.key] ? '' : '*',
      entry.key,
      value,
      sourceOf(entry, inForce[entry.key]!),
    ];
  });
  out.print(table([['', 'entry', 'value', 'source'], ...rows]));
  for (const entry of RECIPE_ENTRIES) {
    const may = [...(entry.words ?? []), ...(entry.range ? [`${entry.range[0]} to ${entry.range[1]}`] : [])].join(', ');
    out.print(`\n${entry.key}\n  ${entry.help}\n  may be: ${may}\n`);
    for (const { id, title } of entry.methods ?? []) out.print(`    ${id}: ${title}\n`);
  }
  out.say('* differs from the built-in recipe. --json prints the document that --recipe reads.');
}

/** Tables of the free energy, as the containers know them. */
import type { FreeEnergyTable } from "../tables/table.js";
import { checkTable } from "./check.js";
import type { TableForm } from "./form.js";
import { itemsOf, LAYOUT, tableOfItems } from "./items.js";
import { meaningOf, recipe, title } from "./meanings.js";

/** Items, their meaning and their check. */
export const freeEnergyForm: TableForm<FreeEnergyTable> = {
  titleOf: (table) => `${title}: ${table.composition.name}`,
  recipe,
  layout: { item: "format/layout", version: LAYOUT },
  itemsOf,
  tableOf: tableOfItems,
  check: checkTable,
  meaningOf,
};

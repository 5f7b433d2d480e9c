/** Packages that are loaded when they are needed and may be missing. */
import { FermistateError } from "../errors.js";

/** What `load` gives; `invalid-option` that says how to install the package where it is missing. */
export async function optionalPackage<T>(name: string, needs: string, load: () => Promise<T>): Promise<T> {
  try {
    return await load();
  } catch (error) {
    const { message = String(error) } = error as Error;
    const allowed = `only with the package ${name}, which is optional: npm install ${name} (${message.split("\n")[0]})`;
    throw new FermistateError("invalid-option", { argument: "package", given: needs, allowed });
  }
}

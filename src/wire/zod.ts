import { extendZodWithOpenApi } from "@asteasolutions/zod-to-openapi";
import { z } from "zod";

extendZodWithOpenApi(z);

/** zod, able to carry what the interface document says of a schema. Every schema of the project is made with this one. */
export { z };

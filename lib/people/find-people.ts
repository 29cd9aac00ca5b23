import { Op, type WhereOptions } from "sequelize";
import { z } from "zod";
import { notFound } from "@/lib/errors";
import { idSchema } from "@/lib/http/ids";
import { cutPage, readCursor, type Page, type PageQuery } from "@/lib/http/paging";
import { demand, type Actor } from "@/lib/people/actor";
import { presentPerson } from "@/lib/people/present";
import type { PersonAnswer } from "@/lib/people/schema";
import { Person } from "@/models/person";

type Find = PageQuery & { by: Actor; state: "open" | "closed" | "all"; search?: string };

/** By name. */
export async function findPeople({ by, limit, cursor, state, search }: Find): Promise<Page<PersonAnswer>> {
  demand(by, "people");
  const after = readCursor(cursor, z.tuple([z.string(), idSchema]));
  const where: WhereOptions[] = [];
  if (state !== "all") where.push({ closedAt: state === "open" ? null : { [Op.ne]: null } });
  if (search) {
    const like = { [Op.iLike]: `%${search.replaceAll(/[\\%_]/g, "\\$&")}%` };
    where.push({ [Op.or]: [{ name: like }, { email: like }] });
  }
  if (after) where.push({ [Op.or]: [{ name: { [Op.gt]: after[0] } }, { name: after[0], id: { [Op.gt]: after[1] } }] });
  const found = await Person.findAll({ where: { [Op.and]: where }, order: [["name", "asc"], ["id", "asc"]], limit: limit + 1 });
  return cutPage(found.map(presentPerson), limit, ({ name, id }) => [name, id]);
}

export async function getPerson({ by, personId }: { by: Actor; personId: string }): Promise<PersonAnswer> {
  demand(by, "people");
  const person = await Person.findByPk(personId);
  if (!person) throw notFound("person");
  return presentPerson(person);
}

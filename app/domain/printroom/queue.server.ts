import { db } from "db/client.server";
import { sql } from "drizzle-orm";
import type { SheetMaking } from "~/domain/editions/transitions";

/** A sheet that is owed and has not left the studio yet. Sizes in mm. No buyer is named here. */
export type QueuedSheet = {
  sheetId: string;
  making: Extract<SheetMaking, "to_print" | "printed" | "signed" | "packed">;
  serial: number;
  mark: string;
  title: string;
  picture: { position: number; of: number };
  editionId: string;
  paper: string;
  process: string;
  image: { width: number; height: number };
  sheet: { width: number; height: number };
  orderId: string | null;
  orderNumber: number | null;
  owedSince: Date;
};

/** Every sheet to be printed, signed or packed, by paper and size and then by the day it was owed. */
export async function sheetQueue(): Promise<QueuedSheet[]> {
  const { rows } = await db.execute<{
    id: string;
    making: QueuedSheet["making"];
    serial: number;
    run: string;
    number: number;
    run_limit: number;
    title: string;
    position: number;
    pictures: number;
    edition_id: string;
    paper: string;
    grammage: number;
    process: string;
    image_width_mm: number;
    image_height_mm: number;
    sheet_width_mm: number;
    sheet_height_mm: number;
    order_id: string | null;
    order_number: number | null;
    owed: Date;
  }>(sql`
    select s.id, s.making, s.serial, c.run, c.number, e."limit" as run_limit, pr.title, pp.position,
      (select count(*) from print_pictures x where x.print_id = pr.id) as pictures, e.id as edition_id,
      pa.name as paper, pa.grammage, f.process, f.image_width_mm, f.image_height_mm, f.sheet_width_mm, f.sheet_height_mm,
      o.id as order_id, o.number as order_number, coalesce(o.paid_at, s.created_at) as owed
    from sheets s
    join copies c on c.id = s.copy_id
    join editions e on e.id = c.edition_id
    join prints pr on pr.id = e.print_id
    join print_pictures pp on pp.id = s.print_picture_id
    join formats f on f.id = c.format_id
    join papers pa on pa.id = f.paper_id
    left join order_lines l on l.id = c.order_line_id
    left join orders o on o.id = l.order_id
    where s.making in ('to_print', 'printed', 'signed', 'packed') and c.placement = 'sold'
    order by pa.name, f.sheet_width_mm, f.sheet_height_mm, owed, c.number, pp.position`);
  return rows.map((r) => ({
    sheetId: r.id,
    making: r.making,
    serial: r.serial,
    mark: `${r.number}/${r.run_limit}`,
    title: r.title,
    picture: { position: r.position, of: r.pictures },
    editionId: r.edition_id,
    paper: `${r.paper}, ${r.grammage} g/m²`,
    process: r.process,
    image: { width: r.image_width_mm, height: r.image_height_mm },
    sheet: { width: r.sheet_width_mm, height: r.sheet_height_mm },
    orderId: r.order_id,
    orderNumber: r.order_number,
    owedSince: new Date(r.owed),
  }));
}

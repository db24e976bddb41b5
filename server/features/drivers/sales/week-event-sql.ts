/**
 * SQL of the chain's event of a week in a region: of several the one that covers most of its days; of equals the
 * region's own before the chain's, then the earlier. To be used as a lateral subquery; gives `code`.
 *
 * @param week SQL expression of the week's first day.
 * @param region SQL expression of the store's region.
 */
export function eventOfWeekSql({ week, region }: { week: string; region: string }): string {
  return `
    select e.code from events e
    where e.first_day <= ${week} + 6 and e.last_day >= ${week} and e.region in ('', ${region})
    order by least(e.last_day, ${week} + 6) - greatest(e.first_day, ${week}) desc,
      (e.region = '') asc, e.first_day, e.code
    limit 1`;
}

/**
 * SQL of what holds for a product in a week: the terms in force on its middle day, which is in the greater part of it.
 * To be used as a lateral subquery; gives the columns of `product_terms`.
 */
export function termsOfWeekSql({ week, productId }: { week: string; productId: string }): string {
  return `
    select t.* from product_terms t
    where t.product_id = ${productId} and t.valid_from <= ${week} + 3
    order by t.valid_from desc
    limit 1`;
}

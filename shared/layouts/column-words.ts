import { promotionColumn } from "../contract/layouts";

const list = (names: string) => names.split("|");

/**
 * What other systems call our columns, as normal names: English, German, French, Spanish and Dutch words of the trade. Of two
 * names that fit, the longer one counts, so "net sales price" is no net sales.
 */
export const columnWords: Record<string, readonly string[]> = {
  week: list("week|week start|week starting|week beginning|week ending|week end|week commencing|week date|wk|w c|w e|date|day|period|sales week|week of|fiscal week" +
    "|woche|kalenderwoche|kw|datum|tag|wochenbeginn|wochenende|wochenanfang|woche bis|woche ab|verkaufswoche|semaine|semaine du|debut de semaine|fin de semaine|jour|semana|inicio de semana|fin semana|fecha|dia|weekbegin|weekeinde|weekstart|weeknummer"),
  store: list("store|store code|store id|store number|store no|store nr|shop|shop id|outlet|branch|branch code|site|location|store num" +
    "|filiale|filialnummer|filial nr|filialnr|markt|marktnummer|markt nr|laden|geschaft|magasin|code magasin|point de vente|pdv|tienda|codigo tienda|sucursal|winkel|winkelnummer|winkel nr|filiaal|filiaalnummer"),
  product: list("product|product code|product id|product number|article|article number|article code|article no|item|item code|item number|item id|sku|upc|ean|barcode|material|plu|gtin|ean code|upc code" +
    "|artikel|artikelnummer|artikel nr|artikelnr|produkt|produktnummer|produktcode|ean nummer|article code ean|produit|code produit|code article|reference|ref|code barres|producto|codigo producto|articulo|codigo articulo|codigo de barras|referencia|artikelcode|productcode|productnummer"),
  units: list("units|unit sales|units sold|sales units|quantity|qty|volume|pieces|sold quantity|quantity sold|sales quantity|sales qty|sales volume|volume sales|unit volume|pcs|unit|kg|kilos" +
    "|menge|absatz|absatzmenge|stuck|stuckzahl|verkaufsmenge|verkaufte menge|anzahl|quantite|quantite vendue|qte|unites|ventes unites|ventes en unites|unidades|cantidad|uds|unidades vendidas|aantal|stuks|afzet|hoeveelheid|verkochte stuks"),
  net_sales: list("net sales|sales|takings|sales value|sales amount|revenue|turnover|value|amount|net revenue|sales net|net amount|net value|sales usd|sales eur|dollars|dollar sales|dollar volume|value sales|gross sales" +
    "|umsatz|nettoumsatz|umsatz netto|umsatz eur|erlos|bruttoumsatz|verkaufswert|chiffre d affaires|chiffre affaires|ca|ca net|ca ttc|ca ht|ventes|montant|importe|ventas|venta neta|ventas netas|facturacion|ingresos|omzet|netto omzet|omzet netto|bedrag"),
  regular_price: list("regular price|regular unit price|base unit price|base price|list price|normal price|reg price|standard price|everyday price|non promo price|full price|rrp|recommended price" +
    "|normalpreis|regularer preis|regelpreis|listenpreis|grundpreis|stammpreis|prix normal|prix regulier|prix de base|prix fond de rayon|prix catalogue|precio regular|precio normal|precio base|precio habitual|precio de lista|normale prijs|reguliere prijs|basisprijs|adviesprijs"),
  shelf_price: list("shelf price|price|price paid|selling price|actual price|current price|retail price|sales price|unit price|promo price|promotion price" +
    "|preis|verkaufspreis|vk|vk preis|regalpreis|aktionspreis|ladenpreis|prix|prix de vente|prix rayon|pvc|pv ttc|precio|precio de venta|pvp|prijs|verkoopprijs|schapprijs|winkelprijs|consumentenprijs"),
  feature: list("feature|featured|leaflet|flyer|advert|ad|advertised|feature flag|in leaflet|on feature|in ad|handzettel|prospekt|werbung|flugblatt|prospectus|tract|folleto|publicidad|folder|reclame|in folder"),
  display: list("display|secondary placement|second placement|end cap|endcap|on display|display flag|zweitplatzierung|sonderplatzierung|mise en avant|tete de gondole|tg|exhibicion|cabecera|cabecera de gondola|tweede plaatsing|displayplaatsing"),
  mechanic: list("mechanic|promotion mechanic|promo mechanic|promotion mechanics|offer type|deal type|aktionsart|aktionsmechanik|mecanique|mecanique promo|mecanica|mecanica promocional|mechaniek|actiemechanisme"),
  [promotionColumn]: list("promotion|promo|promotion type|promo type|offer|deal|support|aktion|aktionstyp|werbeart|promotion art|type promo|type de promotion|promocion|tipo promocion|tipo de promocion|oferta|actie|actietype|promotie"),
  promotion_days: list("promotion days|promo days|days on promotion|days promoted|aktionstage|jours promo|jours de promotion|dias promocion|dias de promocion|actiedagen|promotiedagen"),
  open_days: list("open days|days open|trading days|opening days|offnungstage|verkaufstage|jours ouverts|jours d ouverture|dias abiertos|dias de apertura|openingsdagen|dagen open"),
  stock_out_days: list("stock out days|out of stock days|oos days|days out of stock|stockout days|sold out days|oos|fehltage|ausverkauft tage|ausverkaufte tage|jours de rupture|rupture|dias sin stock|dias de rotura|dagen niet op voorraad|uitverkochte dagen"),
  unit_cost: list("unit cost|cost|cost price|purchase price|buying price|einkaufspreis|ek|ek preis|einstandspreis|prix d achat|cout|cout unitaire|pa ht|coste|coste unitario|costo|precio de coste|precio de compra|inkoopprijs|kostprijs"),
  temperature_c: list("temperature c|temperature|temp|mean temperature|avg temperature|average temperature|temp c|temperatur|mitteltemperatur|durchschnittstemperatur|temperature moyenne|temperatura|temperatura media|temperatuur|gemiddelde temperatuur"),
  event: list("event|event code|occasion|holiday|ereignis|veranstaltung|anlass|feiertag|evenement|code evenement|fete|evento|codigo evento|festivo|gebeurtenis|feestdag"),
  name: list("name|description|title|label|store name|product name|item name|article name|item description|product description|event name|bezeichnung|artikelbezeichnung|produktname|filialname|marktname|beschreibung|nom|libelle|libelle produit|designation|nom magasin|nombre|descripcion|nombre producto|nombre tienda|naam|omschrijving|artikelomschrijving|winkelnaam|productnaam"),
  region: list("region|area|district|territory|gebiet|bezirk|regiao|zone|secteur|zona|comarca|regio|gebied"),
  opened: list("opened|open date|opening date|opened on|date opened|eroffnung|eroffnet|eroffnet am|eroffnungsdatum|ouverture|date d ouverture|ouvert le|apertura|fecha de apertura|fecha apertura|geopend|openingsdatum"),
  closed: list("closed|close date|closing date|closed on|date closed|schliessung|geschlossen|geschlossen am|schliessungsdatum|fermeture|date de fermeture|cierre|fecha de cierre|fecha cierre|gesloten|sluitingsdatum"),
  gtin: list("gtin|ean|upc|barcode|ean code|upc code|ean13|ean 13|gtin 13|gtin13|ean nummer|strichcode|code barres|code ean|codigo de barras|codigo ean|streepjescode"),
  brand: list("brand|brand name|manufacturer brand|marke|markenname|marque|marca|merk|merknaam"),
  category: list("category|category name|product group|department|section|subcategory|class|kategorie|warengruppe|produktgruppe|abteilung|categorie|famille|rayon|categoria|familia|seccion|productgroep|artikelgroep|afdeling"),
  sold_by_weight: list("sold by weight|by weight|weighed|weight item|variable weight|gewichtsartikel|nach gewicht|vendu au poids|au poids|por peso|a peso|op gewicht"),
  valid_from: list("valid from|effective date|effective from|from date|price date|gultig ab|gultig von|ab datum|valable des|valable a partir du|date d effet|valido desde|vigente desde|geldig vanaf|ingangsdatum"),
  tax_rate: list("tax rate|tax|vat|vat rate|sales tax|mwst|mwst satz|ust|steuersatz|mehrwertsteuer|tva|taux tva|taux de tva|iva|tipo iva|tipo de iva|btw|btw tarief|btw percentage"),
  first_day: list("first day|start|start date|from|begins|begin|date from|starts|erster tag|beginn|von|ab|startdatum|premier jour|debut|date debut|date de debut|du|primer dia|inicio|fecha inicio|fecha de inicio|desde|eerste dag|van|begindatum"),
  per_unit: list("per unit|funding per unit|unit funding|contribution per unit|support per unit|rebate per unit|je stuck|pro stuck|zuschuss je stuck|par unite|por unidad|per stuk"),
  lump_sum: list("lump sum|fixed amount|fixed funding|flat amount|pauschale|pauschalbetrag|werbekostenzuschuss|wkz|forfait|montant forfaitaire|importe fijo|vast bedrag"),
  last_day: list("last day|end|end date|to|until|ends|date to|letzter tag|ende|bis|enddatum|dernier jour|fin|date fin|date de fin|au|ultimo dia|fecha fin|fecha de fin|hasta|laatste dag|tot|einde|einddatum"),
};

/** Words in a week's name that say that its last day is given. */
export const lastDayWords = list("ending|weekending|end|ende|endet|bis|fin|jusqu|hasta|einde|tot|wochenende|weekeinde|w e|we|to|until|last");
/** Words in a week's name that say that its first day is given. */
export const firstDayWords = list("start|starting|starts|beginning|begin|begins|commencing|beginn|wochenbeginn|wochenanfang|ab|debut|du|inicio|desde|weekbegin|weekstart|vanaf|w c|wc|from|first");

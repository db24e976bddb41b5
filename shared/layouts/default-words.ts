import type { WordLists } from "../contract/layouts";

const list = (words: string) => words.split("|");

/** Words that layouts start with: English, German, French, Spanish and Dutch words of the trade. */
export const defaultWords: WordLists = {
  yes: list("1|yes|y|true|t|x|ja|j|oui|o|si|sí|s|vrai|wahr|waar"),
  no: list("0|no|n|false|f|-|nein|non|nee|faux|falsch|onwaar"),
  none: list("none|no promotion|regular|no|0|-|n/a|keine|kein|aucune|sans|ninguna|sin|geen"),
  feature: list("feature|featured|leaflet|flyer|advert|ad|f|handzettel|prospekt|werbung|prospectus|tract|catalogue|folleto|folder"),
  display: list("display|secondary placement|end cap|endcap|d|zweitplatzierung|tête de gondole|tg|mise en avant|cabecera|exhibición|tweede plaatsing|kopstelling"),
  feature_and_display: list("feature and display|feature & display|feature+display|feature/display|both|fd|f+d|f&d"),
  price_cut: list("price cut|price_cut|discount|price reduction|rabatt|preisaktion|aktionspreis|remise|réduction|descuento|rebaja|korting|prijsverlaging"),
  multi_buy: list("multi buy|multi_buy|multi-buy|multibuy|2 for 1|3 for 2|mehrfachkauf|mehrkauf|lot|lot virtuel|multicompra|3x2|2x1|meerdere halen|2 halen 1 betalen"),
  coupon: list("coupon|voucher|gutschein|bon de réduction|cupón|kortingsbon|waardebon"),
  other: list("other|sonstige|autre|otra|otro|overig|anders"),
};

import type { Curve, FitSummary } from "@shared/contract/drivers";
import { Term } from "@/components/ui/term";
import { classNames } from "@/lib/class-names";
import { useChain } from "@/lib/chain";
import { useChainFormat } from "@/lib/format/chain-format";
import { currencyDigits } from "@/lib/format/money";
import { parseNumber } from "@/lib/format/parse-number";
import { elasticityAt } from "../view/elasticity";
import { NumberLane } from "./number-lane";

type PriceLaneProps = { curve: Curve & { x: number[] }; level: number; fit: FitSummary; regularPrice: number | null };

/** Price, with the elasticity at the handle; greyed where there was too little to learn it from. */
export const PriceLane = ({ curve, level, fit, regularPrice }: PriceLaneProps) => {
  const format = useChainFormat();
  const coin = 10 ** -currencyDigits(useChain()?.currency ?? "EUR");
  const [low, high] = [curve.x[0], curve.x[curve.x.length - 1]];
  const isSeen = regularPrice !== null && regularPrice >= low && regularPrice <= high;
  return (
    <NumberLane
      curve={curve}
      level={level}
      label="Price"
      title="Demand by price, in times an average week"
      steps={{ min: low, max: high, step: coin }}
      start={isSeen ? regularPrice : (low + high) / 2}
      baseline={isSeen ? regularPrice : null}
      format={format.price}
      parse={parseNumber}
      detail={(price) => {
        const elasticity = elasticityAt(curve, price);
        return (
          <>
            {regularPrice !== null && <>regular {format.price(regularPrice)}</>}
            {elasticity && (
              <span className={classNames("block", !fit.priceLearning.enough && "opacity-60")}>
                <Term meaning="Own-price elasticity: by how many percent units change when the price rises by one percent, at the handle's price.">
                  elasticity
                </Term>{" "}
                <span className="font-medium whitespace-nowrap text-ink">
                  {format.number(elasticity.estimate, { digits: 1 })}
                </span>{" "}
                <span className="whitespace-nowrap">
                  ({format.number(elasticity.lower, { digits: 1 })} to {format.number(elasticity.upper, { digits: 1 })})
                </span>
              </span>
            )}
          </>
        );
      }}
    />
  );
};

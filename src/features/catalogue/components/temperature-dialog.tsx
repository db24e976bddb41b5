import { zodResolver } from "@hookform/resolvers/zod";
import { useForm } from "react-hook-form";
import { z } from "zod";
import type { TemperatureWeek } from "@shared/contract/catalogue-temperatures";
import { toCelsius, toFahrenheit, type TemperatureUnit } from "@/lib/format/temperature";
import { useChainFormat } from "@/lib/format/chain-format";
import { useRefresh } from "../api/refresh";
import { removeTemperature, saveTemperature, type Place } from "../api/temperatures";
import { FoldedHistory } from "./change-history";
import { FormDialog } from "./form-dialog";
import { FormNumber } from "./form-fields";

const degreesSchema = z.object({ temperatureC: z.number("Give a number.").nullable().refine((degrees) => degrees !== null, "Give a number.") });
type Degrees = z.input<typeof degreesSchema>;

type TemperatureDialogProps = { place: Place; week: TemperatureWeek; unit: TemperatureUnit; isReadOnly: boolean; onClose: () => void };

/** A week's mean temperature: entered, changed or removed. */
export const TemperatureDialog = ({ place, week, unit, isReadOnly, onClose }: TemperatureDialogProps) => {
  const refresh = useRefresh();
  const format = useChainFormat();
  // A store without a value of its own shows its region's; saving gives it one.
  const own = week.version === null ? null : week.temperatureC;
  const form = useForm<Degrees, unknown, z.output<typeof degreesSchema>>({
    resolver: zodResolver(degreesSchema), values: { temperatureC: shownIn(unit, own) }, resetOptions: { keepDirtyValues: true },
  });
  return (
    <FormDialog
      title={`${place.place}, ${format.week(week.week)}`} form={form} fields={["temperatureC"]} onClose={onClose} isReadOnly={isReadOnly} refresh={() => refresh("temperatures")}
      save={async ({ temperatureC }) => {
        await saveTemperature({ ...place, week: week.week, version: week.version }, keptFrom(unit, temperatureC ?? 0));
        return "The temperature is saved.";
      }}
      remove={week.version !== null ? {
        sentence: place.scope === "store" ? "The store has its region's again then." : "The week has none then, and is left out of the curves.",
        act: async () => {
          await removeTemperature({ ...place, week: week.week, version: week.version });
          return "The temperature is removed.";
        },
      } : undefined}
      after={<FoldedHistory kind="temperature" code={place.place} />}
    >
      <p className="text-muted">{format.weekDays(week.week)}{week.normalC !== null && <> · usual: {format.temperature(week.normalC)}</>}</p>
      <FormNumber control={form.control} name="temperatureC" label={`Mean of the week, ${unit === "fahrenheit" ? "°F" : "°C"}`} step={0.5} />
    </FormDialog>
  );
};

const shownIn = (unit: TemperatureUnit, celsius: number | null): number | null =>
  celsius === null || unit === "celsius" ? celsius : Number(toFahrenheit(celsius).toFixed(1));

const keptFrom = (unit: TemperatureUnit, degrees: number): number => (unit === "celsius" ? degrees : Number(toCelsius(degrees).toFixed(2)));

import { useWatch, type Control, type UseFormReturn } from "react-hook-form";
import type { Chain } from "@shared/contract/chain";
import { Notice } from "@/components/ui/notice";
import { TextField } from "@/components/ui/text-field";
import { currencyOptions, hourChoices, localeExample, localeOptions, timeZoneOptions, weekdayChoices } from "../view/chain-options";
import { weekChangeConsequences } from "../view/week-change";
import { ChoiceSetting, NumberSetting, SearchedSetting } from "./chosen-field";
import { SettingsGroup } from "./settings-group";

const megabyte = 1024 ** 2;
const mostMegabytes = 20 * 1024;

type GroupProps = { form: UseFormReturn<Chain>; saved: Chain };

export const ChainGroup = ({ form, saved }: GroupProps) => {
  const [locale, currency] = useWatch({ control: form.control, name: ["locale", "currency"] });
  const example = localeExample(locale, currency);
  return (
    <SettingsGroup heading="The chain" intro="How it is called, and how amounts, numbers and times are written.">
      <TextField {...form.register("name")} label="Name" error={form.formState.errors.name?.message} />
      <SearchedSetting
        control={form.control}
        name="currency"
        label="Currency"
        hint="Amounts are not converted: it is what they are in."
        options={currencyOptions(saved.currency)}
      />
      <SearchedSetting
        control={form.control}
        name="locale"
        label="Numbers and dates as in"
        hint={example && `For example ${example}.`}
        options={localeOptions(saved.locale)}
      />
      <SearchedSetting
        control={form.control}
        name="timeZone"
        label="Time zone"
        hint="Decides which day is today, and when sales are due."
        options={timeZoneOptions(saved.timeZone)}
      />
    </SettingsGroup>
  );
};

const sunday = 0;

const calendars = [
  { value: "iso", label: "ISO 8601" },
  { value: "4-5-4", label: "4-5-4" },
];

const calendarHints = {
  iso: "Week 1 is the one that holds the year’s first Thursday.",
  "4-5-4": "The year ends on the Saturday nearest 31 January.",
};

export const WeeksGroup = ({ form, saved }: GroupProps) => {
  const [calendar, weekStart] = useWatch({ control: form.control, name: ["calendar", "weekStart"] });
  const consequences = weekChangeConsequences(saved, { calendar, weekStart });
  return (
    <SettingsGroup heading="Weeks" intro="Sales, plans and curves all go by these weeks, which the calendar numbers.">
      <ChoiceSetting
        control={form.control}
        name="calendar"
        label="Calendar"
        hint={calendarHints[calendar]}
        choices={calendars}
        onChosen={(chosen) => chosen === "4-5-4" && form.setValue("weekStart", sunday, { shouldDirty: true })}
      />
      <ChoiceSetting
        control={form.control}
        name="weekStart"
        label="First day of the week"
        hint={calendar === "4-5-4" ? "Weeks of this calendar begin on Sunday." : "The day that files name a week by."}
        choices={weekdayChoices}
      />
      {consequences.length > 0 && (
        <div className="sm:col-span-2">
          <Notice role="status">
            <p className="font-semibold">If you save this</p>
            <ul className="mt-1 list-disc pl-5">
              {consequences.map((consequence) => (
                <li key={consequence}>{consequence}</li>
              ))}
            </ul>
          </Notice>
        </div>
      )}
    </SettingsGroup>
  );
};

const temperatureUnits = [
  { value: "celsius", label: "Celsius" },
  { value: "fahrenheit", label: "Fahrenheit" },
];

export const ScreensGroup = ({ control }: { control: Control<Chain> }) => (
  <SettingsGroup heading="On screens" intro="What charts and numbers show unless someone asks for something else.">
    <ChoiceSetting
      control={control}
      name="temperatureUnit"
      label="Temperatures in"
      hint="Files give degrees Celsius in any case."
      choices={temperatureUnits}
    />
    <NumberSetting
      control={control}
      name="intervalLevel"
      label="Level of intervals"
      hint="Of 100 weeks, in about so many the actual value lies inside."
      unit={0.01}
      min={50}
      max={99.9}
      step={5}
      suffix="%"
    />
  </SettingsGroup>
);

export const ExtractsGroup = ({ control }: { control: Control<Chain> }) => (
  <SettingsGroup heading="Extracts" intro="What the data admins’ week goes by.">
    <ChoiceSetting control={control} name="salesDueDay" label="Last week’s sales are due on" choices={weekdayChoices} />
    <ChoiceSetting
      control={control}
      name="salesDueHour"
      label="By"
      hint="Data admins get an e-mail if they are missing then."
      choices={hourChoices}
    />
    <NumberSetting
      control={control}
      name="secondLookShare"
      label="Second look from a change of"
      hint="A load that changes a week’s units, or leaves out rows it had, by more than this must be confirmed."
      unit={0.01}
      min={0}
      max={100}
      step={5}
      suffix="%"
    />
    <NumberSetting
      control={control}
      name="uploadLimitBytes"
      label="Largest file"
      hint="A million rows are about 70 MB, or 10 MB compressed."
      unit={megabyte}
      min={1}
      max={mostMegabytes}
      step={100}
      suffix="MB"
    />
  </SettingsGroup>
);

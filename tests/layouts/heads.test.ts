import { detectLayout, headBytes } from "@shared/layouts";
import { detectEncoding, decodeHead } from "@shared/layouts/detect-encoding";
import { splitRecords } from "@shared/layouts/split-records";
import { describe, expect, it } from "vitest";
import { bytesIn } from "./bytes-in";

const utf8 = (text: string) => new TextEncoder().encode(text);

describe("a head", () => {
  const row = "2026-06-08,S1,P1,3,5.97,1.99\n";
  const whole = `week,store,product,units,net_sales,regular_price\n${row.repeat(5_000)}`;

  it("is looked at for 64 KiB, whatever stands behind", () => {
    const head = utf8(whole).subarray(0, headBytes);
    const poisoned = Uint8Array.from([...head, ...utf8('"\n;;;;\n'.repeat(1_000)), 0xff]);
    expect(detectLayout(poisoned, "sales")).toEqual(detectLayout(head, "sales"));
  });

  it("ends at byte 65,536", () => {
    const withAccentAt = (at: number) => detectEncoding(Uint8Array.from({ length: 70_000 }, (_, index) => (index === at ? 0xe9 : 0x61))).value;
    expect([withAccentAt(65_534), withAccentAt(65_536)]).toEqual(["windows-1252", "utf-8"]);
  });

  it("may end in the middle of a row, which then counts for nothing", () => {
    for (const cut of [0, 1, 7, 15]) {
      const head = utf8(`${"x".repeat(cut)}${whole}`).subarray(0, headBytes);
      expect(detectLayout(head, "sales").warnings).toEqual([]);
    }
  });

  it("may end in the middle of a character", () => {
    const text = `name${"é".repeat(headBytes)}`;
    const odd = utf8(`x${text}`).subarray(0, headBytes);
    const even = utf8(text).subarray(0, headBytes);
    expect([detectEncoding(odd).value, detectEncoding(even).value]).toEqual(["utf-8", "utf-8"]);
    expect(decodeHead(odd, "utf-8")?.endsWith("é")).toBe(true);
  });

  it.each([
    ["separators alone", ";".repeat(headBytes)], ["quotes alone", '"'.repeat(headBytes)], ["quotes that open again and again", '"x,'.repeat(headBytes / 3)],
    ["quotes that open on each line", '"a\n'.repeat(headBytes / 3)], ["one long number", "7".repeat(headBytes)], ["words and commas", "a b c d,".repeat(headBytes / 8)],
    ["blanks", `a,${" ".repeat(headBytes)}`], ["empty lines", "\n".repeat(headBytes)], ["grouped digits", "1 234 567 ".repeat(headBytes / 10)],
  ])("of %s is looked through in less than 2 s", (_, text) => {
    const start = performance.now();
    detectLayout(utf8(text), "sales");
    expect(performance.now() - start).toBeLessThan(2_000);
  });

  it("without anything in it gives a layout that nothing is sure of", () => {
    const { layout, columns, confidence } = detectLayout(new Uint8Array(), "sales");
    expect(columns).toEqual([{ theirName: "", position: 0, samples: [], proposed: null, why: "Neither its name nor its values say what it is" }]);
    expect(layout.mapping).toEqual({});
    expect(confidence).toMatchObject({ separator: 0.3, header: 0.5, mapping: 0 });
  });
});

describe("what is detected", () => {
  it("comes with samples, reasons and how sure it is", () => {
    const text = ["Woche;Filiale;Artikelnr;Absatz;Umsatz;Farbe", ...["01", "08", "15", "22", "29"].map((day, at) => `${day}.06.2026;0${at};4711;${at + 1};${at + 1},50;rot`), "29.06.2026;07;4711;9;9,50;"];
    const { columns, confidence } = detectLayout(utf8(text.join("\n")), "sales");
    expect(columns[1]).toEqual({ theirName: "Filiale", position: 1, samples: ["00", "01", "02", "03", "04"], proposed: "store", why: '"Filiale" is a usual name for it', confidence: 0.9 });
    expect(columns[5]).toEqual({ theirName: "Farbe", position: 5, samples: ["rot"], proposed: null, why: "Neither its name nor its values say what it is" });
    // Five of the six needed columns by usual names (0.9 each), one not found.
    expect(confidence).toEqual({ encoding: 1, separator: 1, header: 1, numbers: 1, dates: 1, weekDay: 0.9, mapping: 0.75 });
  });

  it("proposes only columns that it is told of", () => {
    expect(Object.keys(detectLayout(utf8("week,units\n2026-06-08,3\n"), "sales", { knownColumns: ["week"] }).layout.mapping)).toEqual(["week"]);
  });

  it("says in words what can be read in two ways", () => {
    const { warnings } = detectLayout(utf8('week,store,product,units,net_sales,regular_price\n08/06/2026,S1,P1,3,"1,234","2,345"\n'), "sales");
    expect(warnings.map(({ message }) => message)).toEqual([
      '"1,234" can be read in two ways; it is taken as 1234. Look whether that is right.',
      'No date tells whether the day or the month comes first; "08/06/2026" is taken as 2026-06-08.',
    ]);
  });
});

describe("an encoding", () => {
  it.each(["utf-16le", "utf-16be"] as const)("of %s is told by its NUL bytes in Hebrew and Arabic text too", (encoding) => {
    const text = "שבוע;חנות;متجر\n2026-06-08;חנות העיר;12\n";
    expect(detectEncoding(bytesIn(encoding, text)).value).toBe(encoding);
    expect(decodeHead(bytesIn(encoding, text, { mark: true }), encoding)).toBe(text);
  });

  it("is Windows-1252 where bytes are no UTF-8, and less surely so where that has no such characters", () => {
    const [usual, odd] = [detectEncoding(Uint8Array.of(0x80, 0x35)), detectEncoding(Uint8Array.of(0x81, 0x35))];
    expect([usual.value, usual.confidence, odd.value, odd.confidence]).toEqual(["windows-1252", 0.8, "windows-1252", 0.4]);
    expect(decodeHead(Uint8Array.of(0x80, 0x35, 0x92, 0xe9), "windows-1252")).toBe("€5’é");
  });

  it("does not fit bytes that it does not have", () => {
    expect(decodeHead(Uint8Array.of(0x80, 0x35), "utf-8")).toBeNull();
  });
});

describe("a text is split", () => {
  it.each([
    ['a;"b;c"\n1;2', ";", [["a", "b;c"], ["1", "2"]]],
    ['"a ""b"" c",d', ",", [['a "b" c', "d"]]],
    ['"two\nlines",x\r\ny,z\r', ",", [["two\nlines", "x"], ["y", "z"]]],
    ["a,b\n\n  \n,\n", ",", [["a", "b"], ["", ""]]],
    ['a,5" pipe\nb,c', ",", [["a", '5" pipe'], ["b", "c"]]],
    ['"open,x\ny,z', ",", [['"open', "x"], ["y", "z"]]],
    ['"a"b,c\nd,e', ",", [['"a"b', "c"], ["d", "e"]]],
    ["a|b|", "|", [["a", "b", ""]]],
    ["", ",", []],
  ] as const)("%j by %j", (text, separator, records) => {
    expect(splitRecords(text, { separator })).toEqual(records);
  });

  it("without the record that a cut may have shortened, unless it is the only one", () => {
    expect(splitRecords("a,b\n1,2\n3,", { separator: ",", isCut: true })).toEqual([["a", "b"], ["1", "2"]]);
    expect(splitRecords("a,b\n1,2\n", { separator: ",", isCut: true })).toEqual([["a", "b"], ["1", "2"]]);
    expect(splitRecords("a,b", { separator: ",", isCut: true })).toEqual([["a", "b"]]);
  });

  it("line by line where a quote stays open for more lines than a value has", () => {
    const text = `"a,b\n${"c,d\n".repeat(60)}e",f\n`;
    expect(splitRecords(text, { separator: "," })).toHaveLength(62);
  });
});

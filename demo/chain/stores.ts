import type { Region } from "../types";

/** How strongly a store's customers answer to price and promotion: three groups, spread over the regions. */
export type ResponseGroup = "keen" | "middle" | "steady";

export type ChainStore = {
  code: string;
  name: string;
  region: Region;
  opened: string;
  /** Size against the chain's average store: multiplies weekly units. */
  size: number;
  group: ResponseGroup;
  /** Multiplies the chain's price curve (on the log scale). */
  priceResponse: number;
  /** Multiplies the chain's promotion effects (on the log scale). */
  promotionResponse: number;
};

type StoreLine = [
  code: string, name: string, region: Region, opened: string,
  size: number, group: ResponseGroup, priceResponse: number, promotionResponse: number,
];

const lines: StoreLine[] = [
  ["S01", "Ashgill", "Town", "1998-03-16", 1.42, "keen", 1.42, 1.18],
  ["S02", "Brackenby", "Moor", "2004-09-06", 1.08, "middle", 0.98, 1.02],
  ["S03", "Cawl Bay", "Coast", "2011-05-02", 0.86, "steady", 0.6, 0.62],
  ["S04", "Dunmere", "Moor", "2001-10-15", 0.97, "keen", 1.27, 1.25],
  ["S05", "Eskwick", "Town", "1996-04-01", 1.63, "middle", 0.93, 0.92],
  ["S06", "Farrow Cross", "Town", "1999-08-30", 1.55, "steady", 0.61, 0.78],
  ["S07", "Gullane End", "Coast", "2008-02-18", 1.22, "keen", 1.35, 1.14],
  ["S08", "Hawkstow", "Moor", "2006-11-13", 1.05, "middle", 1.07, 1.06],
  ["S09", "Inglebeck", "Moor", "2003-06-23", 1.01, "steady", 0.57, 0.63],
  ["S10", "Jarrowby", "Town", "2016-03-07", 0.42, "keen", 1.31, 1.29],
  ["S11", "Keldmoor", "Moor", "2009-09-21", 1.02, "middle", 1.05, 1.04],
  ["S12", "Lambsea", "Coast", "2000-05-08", 0.88, "steady", 0.72, 0.66],
  ["S13", "Merefold", "Town", "1995-10-02", 1.6, "keen", 1.33, 1.16],
  ["S14", "Nunhaven", "Coast", "2007-04-16", 1.0, "middle", 1.02, 0.95],
  ["S15", "Otterwell", "Coast", "2002-07-01", 1.31, "steady", 0.65, 0.64],
  ["S16", "Pikeshaw", "Moor", "2012-01-23", 0.83, "keen", 1.38, 1.17],
  ["S17", "Quernby", "Town", "2014-10-27", 0.46, "middle", 0.96, 1.03],
  ["S18", "Ravensea", "Coast", "2010-06-14", 0.61, "steady", 0.69, 0.8],
  ["S19", "Skelholm", "Coast", "2015-05-18", 0.52, "keen", 1.29, 1.21],
  ["S20", "Thornwick", "Moor", "1997-09-08", 1.58, "middle", 0.91, 1.05],
  ["S21", "Ullbeck", "Moor", "2017-02-06", 0.44, "steady", 0.58, 0.61],
  ["S22", "Varley", "Town", "2005-03-14", 0.98, "keen", 1.4, 1.28],
  ["S23", "Wharfend", "Coast", "2013-08-19", 0.84, "middle", 1.0, 0.9],
  ["S24", "Yarrowby", "Town", "1999-11-22", 1.52, "steady", 0.54, 0.58],
];

/** The 24 stores of Larkmoor Grocers, in invented towns. */
export const stores: ChainStore[] = lines.map(
  ([code, name, region, opened, size, group, priceResponse, promotionResponse]) => ({
    code, name, region, opened, size, group, priceResponse, promotionResponse,
  }),
);

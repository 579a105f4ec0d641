import { coordinateProblem, dataSlug, sexagesimal } from "~shared/dependence/namedData";

describe("coordinates", () => {
  // By hand: 108.02 / 15 = 7.201333 h = 7 h 12 min 4.8 s; 5.5° = 5° 30′.
  it.each([
    [108.02, 5.5, "07h12m04.80s +05°30′00.0″"],
    [108.02, -5.5, "07h12m04.80s −05°30′00.0″"],
    [0, 0, "00h00m00.00s +00°00′00.0″"],
    [0, -0.000001, "00h00m00.00s +00°00′00.0″"],
    [180, -0.5, "12h00m00.00s −00°30′00.0″"],
    [29.9999999, 89.99999, "02h00m00.00s +90°00′00.0″"],
    [359.99999999, -90, "00h00m00.00s −90°00′00.0″"],
  ])("of %p, %p read %s, and no part ever reads 60", (ra, dec, words) => {
    expect(sexagesimal(ra, dec)).toBe(words);
  });

  it.each([
    ["360", "0", "ra"],
    ["-1", "0", "ra"],
    ["07 12 04", "0", "ra"],
    ["1e2", "0", "ra"],
    ["12", "90.01", "dec"],
    ["12", null, "dec"],
    [null, "12", "ra"],
  ])("refuse %p, %p at %s", (ra, dec, field) => {
    expect(coordinateProblem(ra, dec)?.field).toBe(field);
  });

  it.each([
    [null, null],
    ["0", "-90"],
    ["359.999", "\u221290"],
    ["12.5", "+3.25"],
  ])("take %p, %p", (ra, dec) => {
    expect(coordinateProblem(ra, dec)).toBeNull();
  });
});

describe("the address of a name", () => {
  it.each([
    ["QV 0719+31", "qv-0719-plus-31"],
    ["QV 1147\u221208", "qv-1147-minus-08"],
    ["Marram field-2", "marram-field-2"],
    ["Ærø Högfält", "r-hogfalt"],
    ["Lyα", "ly"],
    ["α", "data"],
    ["../../desk", "desk"],
  ])("%s is %s", (name, slug) => {
    expect(dataSlug(name)).toBe(slug);
  });
});

import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { writeCsv } from "../../src/output/csv.js";
import { writeJson } from "../../src/output/json.js";

/** Reads comma-separated values by the grammar of RFC 4180, section 2. */
function readCsv(text: string): string[][] {
  const rows: string[][] = [[]];
  const cells = /(?:"((?:[^"]|"")*)"|([^",\r\n]*))(,|\r\n)/gy;
  for (let match = cells.exec(text); match; match = cells.exec(text)) {
    rows.at(-1)?.push(match[1] === undefined ? (match[2] as string) : match[1].replaceAll('""', '"'));
    if (match[3] === "\r\n") rows.push([]);
  }
  expect(rows.pop()).toEqual([]);
  return rows;
}

describe("comma-separated values (RFC 4180)", () => {
  test("quotes what must be quoted and ends lines with CRLF", () => {
    expect(
      writeCsv(
        ["coil", "text"],
        [
          ["CR1", 'say "go", twice'],
          ["CR2", "a\nb"],
        ],
      ),
    ).toBe('coil,text\r\nCR1,"say ""go"", twice"\r\nCR2,"a\nb"\r\n');
  });

  test("no text can be taken for a formula", () => {
    expect(writeCsv([], [["=1+1", "+A1", "-A1", "@sum", "\tx", "L+", -3]]).split("\r\n")[1]).toBe("'=1+1,'+A1,'-A1,'@sum,'\tx,L+,-3");
  });

  test("comes back as it was, but for the apostrophe before what looks like a formula", () => {
    fc.assert(
      fc.property(fc.array(fc.array(fc.string(), { minLength: 2, maxLength: 2 })), (rows) => {
        const guarded = rows.map((row) => row.map((text) => (/^[=+\-@\t\r]/.test(text) ? `'${text}` : text)));
        expect(readCsv(writeCsv(["a", "b"], rows))).toEqual([["a", "b"], ...guarded]);
      }),
    );
  });
});

test("JSON keeps its keys in order and ends with a line end", () => {
  expect(writeJson([{ b: 1, a: 2 }])).toBe('[\n  {\n    "b": 1,\n    "a": 2\n  }\n]\n');
});

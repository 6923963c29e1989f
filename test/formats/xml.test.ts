import { describe, expect, it } from "vitest";
import { parseOem, parseOmm, parseOpm, writeOem, writeOpm } from "../../src/formats/index.ts";
import { changed, inventedOem, inventedOpm } from "./inventedMessages.ts";
import { expectRefusal } from "./refusal.ts";

const opmXml = writeOpm(parseOpm(inventedOpm).message, "xml");
const oemXml = writeOem(parseOem(inventedOem).message, "xml");

describe("messages in XML", () => {
  it("may have prefixes, attributes, entities of XML, CDATA, comments, CR LF and blank lines before", () => {
    const odd = opmXml
      .replace("<opm ", '<n:opm xmlns:n="urn:x" ')
      .replace("</opm>", "</n:opm>")
      .replace("<X>8000.5", '<!-- here --><X units="km">8000.5')
      .replace("<MASS>0.75", '<MASS units="KG"><![CDATA[0.75]]>')
      .replace("TIGHT", "&#84;IGHT");
    expect(parseOpm(`\ufeff\r\n${odd.replaceAll("\n", "\r\n")}`).message).toEqual(parseOpm(inventedOpm).message);
  });

  it("name the line of the text", () => {
    const line = oemXml.split("\n").findIndex((one) => one.includes("<Y>2</Y>")) + 1;
    expectRefusal(() => parseOem(changed(oemXml, "<Y>2</Y>", "<Y>two</Y>")), `OEM, line ${line}, Y`, '"two"');
    const crlf = `\r\n${changed(oemXml, "<Y>2</Y>", "<Y>two</Y>").replaceAll("\n", "\r\n")}`;
    expectRefusal(() => parseOem(crlf), `OEM, line ${line + 1}, Y`);
  });

  const opmRows: readonly (readonly [what: string, by: string, parts: readonly string[]])[] = [
    ["<X>8000.5</X>", '<X units="m">8000.5</X>', ["[m]", "[km]"]],
    ["<X>8000.5</X>", "<X>8000.5</X><X>8000.5</X>", ["once"]],
    ["<X>8000.5</X>", "<XX>8000.5</XX>", ["perhaps X was meant"]],
    ["<X>8000.5</X>", "<X><Y>8000.5</Y></X>", ["a value, not further elements"]],
    ["</X>", "</Z>", ["well-formed"]],
    ["<body>", "<body>stray", ["no text between"]],
    ["<opm ", "<omm ", ["well-formed"]],
    ['id="CCSDS_OPM_VERS"', 'id="CCSDS_OMM_VERS"', ["CCSDS_OPM_VERS"]],
    [' version="2.0"', "", ["the attribute version"]],
    ['version="2.0"', 'version="2.1"', ["versions"]],
    ["<USER_DEFINED parameter=", "<USER_DEFINED name=", ["parameter"]],
    ['parameter="CORK"', 'parameter="A CORK"', ["without blanks"]],
    ["<stateVector>", "<stateVector><extra/>", ["a keyword of <stateVector>"]],
    ["<data>", "<data><covarianceMatrix/><surprise/>", ["<surprise>"]],
    ["</body>", "<segment/></body>", ["one <segment>"]],
  ];

  it.each(opmRows)("OPM with %j as %j", (what, by, parts) => {
    expectRefusal(() => parseOpm(changed(opmXml, what, by)), ...parts);
  });

  const oemRows: readonly (readonly [what: string, by: string, parts: readonly string[]])[] = [
    ["<X_DDOT>0.001</X_DDOT>", "", ["all three accelerations"]],
    ["<EPOCH>2033-03-03T00:01:00</EPOCH>", "", ["EPOCH", "must be given"]],
    ["<CX_X>1</CX_X>", "", ["CX_X is missing"]],
    ["</covarianceMatrix>", "<EPOCH>2033-03-03T00:01:00</EPOCH></covarianceMatrix>", ["EPOCH", "once"]],
  ];

  it.each(oemRows)("OEM with %j as %j", (what, by, parts) => {
    expectRefusal(() => parseOem(changed(oemXml, what, by)), ...parts);
  });

  it("bring no document type and no entities of their own", () => {
    const bomb = `<!DOCTYPE omm [<!ENTITY a "kite"><!ENTITY b "&a;&a;&a;&a;">]><omm>&b;</omm>`;
    expectRefusal(() => parseOmm(bomb), "no document type");
    expectRefusal(() => parseOmm("<omm>&kite;</omm>"), "well-formed XML");
    expectRefusal(() => parseOmm('<!DOCTYPE omm SYSTEM "file:///etc/hostname"><omm/>'), "no document type");
  });

  it("are refused when they nest too deep", () => {
    expectRefusal(() => parseOmm("<omm>".repeat(100_000)), "nested at most 32 deep");
    expectRefusal(() => parseOmm(`${"<omm>".repeat(33)}${"</omm>".repeat(33)}`), "nested at most 32 deep");
  });
});

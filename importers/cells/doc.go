// Package cells reads the cells of an .xlsx workbook: what is stored, never what is displayed. It knows zip packages, parts
// and cells (ECMA-376-1, ISO/IEC 29500-1) and no word of the domain. It follows no link, opens no external part and refuses
// document type declarations; what a file may unpack to is bounded. Unpacking and scanning are its own, for speed; the tests hold
// them against compress/flate, encoding/xml and excelize.
package cells

// Package opcsign signs OPC packages (such as .xlsx) and verifies them: digital signatures of ECMA-376 part 2 with
// XAdES properties, as office programs write and check them.
//
// The verifier is closed-world. A package is sound only when every part, every relationship and every content type is
// covered by every signature, the zip archive holds nothing but its entries, and each statement is read from signed
// elements alone. Whatever else is found is a [Reason] with a stable code; the catalogue is in codes.go.
package opcsign

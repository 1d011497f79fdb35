// Package figure makes the pictures of a result as plain marks: lines, boxes, dots, diamonds and labels, each with the role
// it plays and a name. It knows no colour, no font and no screen; package draw turns marks into images, the window places
// them, and the workbook carries them, so that screen and evidence cannot differ.
//
// Coordinates are points from the top left corner of a figure of stated width and height; y grows downwards.
package figure

package cells

import "strconv"

// The largest sheet there is (ISO/IEC 29500-1, as all spreadsheet programs hold it).
const (
	MaxRow = 1 << 20
	MaxCol = 1 << 14
)

// Name is the address of a cell from its column and row, both counted from 1: Name(4, 17) is "D17".
func Name(col, row int) string { return Letters(col) + strconv.Itoa(row) }

// Letters is the name of a column counted from 1: Letters(28) is "AB". It is "?" for a number below 1.
func Letters(col int) string {
	if col < 1 {
		return "?"
	}
	var b [14]byte
	i := len(b)
	for ; col > 0; col = (col - 1) / 26 {
		i--
		b[i] = byte('A' + (col-1)%26)
	}
	return string(b[i:])
}

// Parse is the column and row of an address such as "D17" or "$D$17"; false for anything else and outside the largest sheet.
func Parse(name string) (col, row int, ok bool) {
	i := 0
	skip := func() {
		if i < len(name) && name[i] == '$' {
			i++
		}
	}
	skip()
	for ; i < len(name); i++ {
		c := name[i] &^ 0x20
		if c < 'A' || c > 'Z' {
			break
		}
		if col = col*26 + int(c-'A'+1); col > MaxCol {
			return 0, 0, false
		}
	}
	skip()
	digits := i
	for ; i < len(name); i++ {
		if name[i] < '0' || name[i] > '9' || i == digits && name[i] == '0' {
			return 0, 0, false
		}
		if row = row*10 + int(name[i]-'0'); row > MaxRow {
			return 0, 0, false
		}
	}
	return col, row, col > 0 && row > 0
}

package catalog

import (
	"regexp"

	"parch/internal/document"
)

var casForm = regexp.MustCompile(`^[0-9]{2,7}-[0-9]{2}-[0-9]$`)

// casNumber reads a registry number, such as 108-88-3. Its last digit is the sum
// of the others, each times its place counted from the right, modulo 10.
func casNumber(n *document.Node) string {
	number := n.Text()
	if number == "" {
		return ""
	}
	if !casForm.MatchString(number) {
		n.Fail(`%q is not a CAS number; write it like "108-88-3"`, number)
		return number
	}
	sum, place := 0, 0
	for i := len(number) - 3; i >= 0; i-- { // right of it stand the check digit and a hyphen
		if number[i] != '-' {
			place++
			sum += place * int(number[i]-'0')
		}
	}
	if last := number[len(number)-1]; int(last-'0') != sum%10 {
		n.Fail("%q is mistyped: with these digits a CAS number ends in %d", number, sum%10)
	}
	return number
}

package catalog

import (
	"fmt"
	"regexp"
	"strings"

	"parch/internal/document"
)

var casForm = regexp.MustCompile(`^[0-9]{2,7}-[0-9]{2}-[0-9]$`)

// casNumber reads a registry number, such as 108-88-3.
func casNumber(n *document.Node) string {
	number := n.Text()
	if number == "" {
		return ""
	}
	if !casForm.MatchString(number) {
		n.Fail(`%q is not a CAS number; write it like "108-88-3"`, number)
		return number
	}
	if right := rightCAS(number); number != right {
		n.Fail("%q is mistyped: with these digits a CAS number ends in %s", number, right[len(right)-1:])
	}
	return number
}

// rightCAS is a registry number with the check digit that fits: the sum of the other
// digits, each times its place counted from the right, modulo 10.
func rightCAS(number string) string {
	front := number[:len(number)-1] // with the hyphen before the check digit
	sum, place := 0, 0
	for i := len(front) - 1; i >= 0; i-- {
		if front[i] != '-' {
			place++
			sum += place * int(front[i]-'0')
		}
	}
	return fmt.Sprintf("%s%d", front, sum%10)
}

// MistypedCAS says what is wrong with a registry number whose check digit does not fit, and
// which solvent has the number with the digit that does; "" of anything else.
func (c *Catalog) MistypedCAS(typed string) string {
	typed = strings.TrimSpace(typed)
	if !casForm.MatchString(typed) || rightCAS(typed) == typed {
		return ""
	}
	right := rightCAS(typed)
	for _, key := range keysOf(c.Solvents) {
		if s := c.Solvents[key]; s.CAS == right {
			return fmt.Sprintf("the check digit of %s does not fit; %s is %s", typed, right, s.Name)
		}
	}
	return fmt.Sprintf("the check digit of %s does not fit: with these digits a CAS number ends in %s", typed, right[len(right)-1:])
}

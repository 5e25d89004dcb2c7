package codefile

import (
	"reflect"

	"shearbook/vs30/siteclass"
)

// equal reports whether two codes say the same, whatever they are called and
// whoever adopted them.
func equal(a, b siteclass.Code) bool {
	x, y := reflect.ValueOf(unlabelled(a)), reflect.ValueOf(unlabelled(b))
	for i := range x.NumField() {
		if x.Type().Field(i).IsExported() && !reflect.DeepEqual(x.Field(i).Interface(), y.Field(i).Interface()) {
			return false
		}
	}
	return true
}

// unlabelled is a code without its ID and without what says whose table it
// is.
func unlabelled(c siteclass.Code) siteclass.Code {
	if c.Own != nil {
		c.Edition = c.Own.Edition
	}
	c.ID, c.Own = "", nil
	return c
}

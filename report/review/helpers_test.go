package review_test

import "shearbook/vs30/siteclass"

// code is a built-in code.
func code(id string) *siteclass.Code {
	c, err := siteclass.Find(id)
	if err != nil {
		panic(err)
	}
	return c
}

package app

import "os/user"

// person is who works here, as the system knows them: what stands in the trail. A signature says it for certain.
func person() string {
	u, err := user.Current()
	switch {
	case err != nil:
		return "unknown user"
	case u.Name != "" && u.Name != u.Username:
		return u.Name + " (" + u.Username + ")"
	}
	return u.Username
}

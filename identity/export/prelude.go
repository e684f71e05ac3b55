package export

import _ "embed" // the lemmas are files of Coq

// The fixed lemmas, each proved where it stands.
var (
	//go:embed coq/signs.v
	signsText string
	//go:embed coq/continuity.v
	continuityText string
	//go:embed coq/fractions.v
	fractionsText string
)

const headerText = `Require Import Reals List Lra.
Import ListNotations.
Open Scope R_scope.
`

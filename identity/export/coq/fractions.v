(* Fractions *)

Lemma zero_quotient : forall n d : R, n = 0 -> n / d = 0.
Proof. intros n d H. rewrite H. unfold Rdiv. ring. Qed.

Lemma equal_from_difference : forall l r z d : R,
  z = 0 -> l - r = z / d -> l = r.
Proof.
  intros l r z d Hz E. rewrite (zero_quotient z d Hz) in E.
  apply Rminus_diag_uniq. exact E.
Qed.

(* From a product, quotient or power that does not vanish: nor do its parts. *)
Ltac vanishes H := let E := fresh in intro E; apply H; rewrite E; unfold Rdiv; ring.

Ltac nonzero_parts H :=
  match type of H with
  | ?a * ?b <> 0 =>
    let Ha := fresh in assert (Ha : a <> 0) by vanishes H;
    let Hb := fresh in assert (Hb : b <> 0) by vanishes H;
    nonzero_parts Ha; nonzero_parts Hb
  | ?a / _ <> 0 =>
    let Ha := fresh in assert (Ha : a <> 0) by vanishes H; nonzero_parts Ha
  | ?a ^ _ <> 0 =>
    let Ha := fresh in assert (Ha : a <> 0) by vanishes H; nonzero_parts Ha
  | - ?a <> 0 =>
    let Ha := fresh in assert (Ha : a <> 0) by vanishes H; nonzero_parts Ha
  | _ => idtac
  end.

Ltac nonzero :=
  repeat match goal with |- _ /\ _ => split end;
  first
    [ assumption
    | match goal with
      | H : _ <> 0 |- _ <> 0 => let E := fresh in intro E; apply H; lra
      end ].

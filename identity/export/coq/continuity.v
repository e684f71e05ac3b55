(* Polynomials in one real variable *)

Fixpoint value (l : list R) (t : R) : R :=
  match l with
  | nil => 0
  | a :: l => a + t * value l t
  end.

Definition polynomial (f : R -> R) : Prop := exists l, forall t, f t = value l t.

Fixpoint added (l m : list R) : list R :=
  match l, m with
  | nil, _ => m
  | _, nil => l
  | a :: l, b :: m => (a + b) :: added l m
  end.

Fixpoint scaled (c : R) (l : list R) : list R :=
  match l with
  | nil => nil
  | a :: l => c * a :: scaled c l
  end.

Fixpoint multiplied (l m : list R) : list R :=
  match l with
  | nil => nil
  | a :: l => added (scaled a m) (0 :: multiplied l m)
  end.

Lemma value_added : forall l m t, value (added l m) t = value l t + value m t.
Proof.
  induction l as [| a l IH]; intros m t.
  - simpl. ring.
  - destruct m as [| b m]; simpl; [ring | rewrite IH; ring].
Qed.

Lemma value_scaled : forall c l t, value (scaled c l) t = c * value l t.
Proof.
  intros c l t. induction l as [| a l IH]; simpl; [ring | rewrite IH; ring].
Qed.

Lemma value_multiplied : forall l m t, value (multiplied l m) t = value l t * value m t.
Proof.
  intros l m t. induction l as [| a l IH]; simpl; [ring |].
  rewrite value_added, value_scaled. simpl. rewrite IH. ring.
Qed.

Lemma polynomial_constant : forall c, polynomial (fun _ => c).
Proof. intro c. exists [c]. intro t. simpl. ring. Qed.

Lemma polynomial_sum : forall f g,
  polynomial f -> polynomial g -> polynomial (fun t => f t + g t).
Proof.
  intros f g [l Hl] [m Hm]. exists (added l m). intro t.
  rewrite value_added, Hl, Hm. reflexivity.
Qed.

Lemma polynomial_product : forall f g,
  polynomial f -> polynomial g -> polynomial (fun t => f t * g t).
Proof.
  intros f g [l Hl] [m Hm]. exists (multiplied l m). intro t.
  rewrite value_multiplied, Hl, Hm. reflexivity.
Qed.

Lemma polynomial_opposite : forall f, polynomial f -> polynomial (fun t => - f t).
Proof.
  intros f [l Hl]. exists (scaled (-1) l). intro t.
  rewrite value_scaled, Hl. ring.
Qed.

Lemma polynomial_difference : forall f g,
  polynomial f -> polynomial g -> polynomial (fun t => f t - g t).
Proof.
  intros f g Hf Hg. unfold Rminus.
  apply polynomial_sum; [exact Hf | apply polynomial_opposite; exact Hg].
Qed.

Lemma polynomial_power : forall f n, polynomial f -> polynomial (fun t => f t ^ n).
Proof.
  intros f n Hf. induction n as [| n IH]; simpl.
  - apply polynomial_constant.
  - apply polynomial_product; assumption.
Qed.

Definition line (a b t : R) : R := a + t * (b - a).

Lemma polynomial_line : forall a b, polynomial (fun t => line a b t).
Proof. intros a b. exists [a; b - a]. intro t. unfold line. simpl. ring. Qed.

Lemma line_start : forall a b, line a b 0 = a.
Proof. intros a b. unfold line. ring. Qed.

Lemma line_end : forall a b, line a b 1 = b.
Proof. intros a b. unfold line. ring. Qed.

Ltac polynomial_in_t :=
  lazymatch goal with
  | |- polynomial (fun t => @?f t + @?g t) =>
    apply (polynomial_sum f g); cbv beta; polynomial_in_t
  | |- polynomial (fun t => @?f t - @?g t) =>
    apply (polynomial_difference f g); cbv beta; polynomial_in_t
  | |- polynomial (fun t => - @?f t) =>
    apply (polynomial_opposite f); cbv beta; polynomial_in_t
  | |- polynomial (fun t => @?f t * @?g t) =>
    apply (polynomial_product f g); cbv beta; polynomial_in_t
  | |- polynomial (fun t => @?f t ^ ?n) =>
    apply (polynomial_power f n); cbv beta; polynomial_in_t
  | |- polynomial (fun t => line ?a ?b t) => apply polynomial_line
  | _ => apply polynomial_constant
  end.

(* near P: P holds for all small positive t *)
Definition near (P : R -> Prop) : Prop :=
  exists d, 0 < d /\ forall t, 0 < t < d -> P t.

Lemma near_and : forall P Q, near P -> near Q -> near (fun t => P t /\ Q t).
Proof.
  intros P Q [d [Hd HP]] [e [He HQ]]. exists (Rmin d e). split.
  - apply Rmin_pos; assumption.
  - intros t Ht. pose proof (Rmin_l d e). pose proof (Rmin_r d e).
    split; [apply HP | apply HQ]; lra.
Qed.

Lemma near_implies : forall P Q : R -> Prop,
  (forall t, P t -> Q t) -> near P -> near Q.
Proof.
  intros P Q H [d [Hd HP]]. exists d. split; [exact Hd |].
  intros t Ht. apply H, HP, Ht.
Qed.

Lemma near_interval : near (fun t => 0 < t < 1).
Proof. exists 1. split; [lra |]. intros t Ht. exact Ht. Qed.

Lemma value_bounded : forall l, exists b, 0 <= b /\ forall t, 0 < t < 1 -> - b <= value l t <= b.
Proof.
  induction l as [| a l [b [Hb IH]]].
  - exists 0. simpl. split; [lra |]. intros t _. lra.
  - exists (Rabs a + b). pose proof (Rabs_pos a). split; [lra |].
    intros t Ht. simpl. specialize (IH t Ht).
    assert (- b <= t * value l t <= b).
    { split.
      - apply Rle_trans with (t * - b); [| apply Rmult_le_compat_l; lra].
        replace (- b) with (1 * - b) at 1 by ring.
        assert (0 <= (1 - t) * b) by (apply Rmult_le_pos; lra). lra.
      - apply Rle_trans with (t * b); [apply Rmult_le_compat_l; lra |].
        assert (0 <= (1 - t) * b) by (apply Rmult_le_pos; lra). lra. }
    pose proof (Rle_abs a). pose proof (Rle_abs (- a)) as Ha.
    rewrite Rabs_Ropp in Ha. lra.
Qed.

Lemma near_value_positive : forall a l, 0 < a -> near (fun t => 0 < value (a :: l) t).
Proof.
  intros a l Ha. destruct (value_bounded l) as [b [Hb H]].
  exists (Rmin 1 (a / (b + 1))). split.
  - apply Rmin_pos; [lra |]. apply Rdiv_lt_0_compat; lra.
  - intros t Ht. pose proof (Rmin_l 1 (a / (b + 1))). pose proof (Rmin_r 1 (a / (b + 1))).
    assert (Hv : - b <= value l t <= b) by (apply H; lra). simpl.
    assert (Hs : t * (b + 1) < a).
    { apply Rlt_le_trans with (a / (b + 1) * (b + 1)).
      - apply Rmult_lt_compat_r; lra.
      - right. field. lra. }
    assert (0 <= t * (value l t + b)) by (apply Rmult_le_pos; lra). lra.
Qed.

Lemma near_positive : forall f, polynomial f -> 0 < f 0 -> near (fun t => 0 < f t).
Proof.
  intros f [l Hl] H0. destruct l as [| a l].
  - rewrite Hl in H0. simpl in H0. lra.
  - assert (Ha : 0 < a) by (rewrite Hl in H0; simpl in H0; lra).
    apply near_implies with (2 := near_value_positive a l Ha).
    intros t Ht. rewrite Hl. exact Ht.
Qed.

Lemma near_negative : forall f, polynomial f -> f 0 < 0 -> near (fun t => f t < 0).
Proof.
  intros f Hf H0.
  assert (H : near (fun t => 0 < - f t)).
  { apply (near_positive (fun t => - f t)); [apply polynomial_opposite; exact Hf | lra]. }
  apply near_implies with (2 := H). intros t Ht. lra.
Qed.

Lemma near_value_nonzero : forall l s, value l s <> 0 -> near (fun t => value l t <> 0).
Proof.
  induction l as [| a l IH]; intros s Hs.
  - simpl in Hs. exfalso. apply Hs. reflexivity.
  - destruct (Rtotal_order a 0) as [Ha | [Ha | Ha]].
    + assert (H : near (fun t => value (a :: l) t < 0)).
      { apply near_negative; [exists (a :: l); reflexivity | simpl; lra]. }
      apply near_implies with (2 := H). intros t Ht. lra.
    + assert (Hl : value l s <> 0).
      { intro E. apply Hs. simpl. rewrite E, Ha. ring. }
      destruct (IH s Hl) as [d [Hd H]]. exists d. split; [exact Hd |].
      intros t Ht. simpl. rewrite Ha, Rplus_0_l.
      apply Rmult_integral_contrapositive_currified; [lra | apply H; exact Ht].
    + apply near_implies with (2 := near_value_positive a l Ha). intros t Ht. lra.
Qed.

Lemma near_nonzero : forall f s, polynomial f -> f s <> 0 -> near (fun t => f t <> 0).
Proof.
  intros f s [l Hl] Hs. rewrite Hl in Hs.
  apply near_implies with (2 := near_value_nonzero l s Hs).
  intros t Ht. rewrite Hl. exact Ht.
Qed.

Lemma by_continuity : forall m p : R -> R,
  polynomial m -> polynomial p -> m 1 <> 0 ->
  near (fun t => 0 <= m t /\ 0 <= m t * p t) -> 0 <= p 0.
Proof.
  intros m p Hm Hp H1 H. destruct (Rlt_or_le (p 0) 0) as [Hneg | Hpos]; [| exact Hpos].
  exfalso.
  destruct (near_and _ _ H (near_and _ _ (near_nonzero m 1 Hm H1) (near_negative p Hp Hneg)))
    as [d [Hd Ht]].
  destruct (Ht (d / 2)) as [[Ha Hb] [Hc He]]; [lra |].
  assert (0 < m (d / 2) * - p (d / 2)) by (apply Rmult_lt_0_compat; lra). lra.
Qed.

Lemma between_nonneg : forall u v t : R,
  0 < t < 1 -> 0 <= u -> 0 <= v -> 0 <= (1 - t) * u + t * v.
Proof.
  intros u v t Ht Hu Hv.
  apply sum_nonneg; apply product_nonneg; lra.
Qed.

Lemma nonneg_equal : forall v w : R, v = w -> 0 <= w -> 0 <= v.
Proof. intros v w E H. rewrite E. exact H. Qed.

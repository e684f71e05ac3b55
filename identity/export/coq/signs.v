(* Signs *)

Lemma square_nonneg : forall a : R, 0 <= a^2.
Proof. intro a. rewrite <- Rsqr_pow2. apply Rle_0_sqr. Qed.

Lemma product_nonneg : forall a b : R, 0 <= a -> 0 <= b -> 0 <= a * b.
Proof. intros a b Ha Hb. apply Rmult_le_pos; assumption. Qed.

Lemma sum_nonneg : forall a b : R, 0 <= a -> 0 <= b -> 0 <= a + b.
Proof. intros a b Ha Hb. lra. Qed.

Lemma sum_pos_left : forall a b : R, 0 < a -> 0 <= b -> 0 < a + b.
Proof. intros a b Ha Hb. lra. Qed.

Lemma sum_pos_right : forall a b : R, 0 <= a -> 0 < b -> 0 < a + b.
Proof. intros a b Ha Hb. lra. Qed.

Lemma product_pos : forall a b : R, 0 < a -> 0 < b -> 0 < a * b.
Proof. intros a b Ha Hb. apply Rmult_lt_0_compat; assumption. Qed.

Lemma numerator_pos : forall n d : R, 0 < d -> 0 < n / d -> 0 < n.
Proof.
  intros n d Hd H. replace n with (n / d * d) by (field; lra).
  apply Rmult_lt_0_compat; assumption.
Qed.

Lemma numerator_nonneg : forall n d : R, 0 < d -> 0 <= n / d -> 0 <= n.
Proof.
  intros n d Hd H. replace n with (n / d * d) by (field; lra).
  apply Rmult_le_pos; lra.
Qed.

Lemma numerator_zero : forall n d : R, 0 < d -> n / d = 0 -> n = 0.
Proof.
  intros n d Hd H. replace n with (n / d * d) by (field; lra).
  rewrite H. ring.
Qed.

Lemma quotient_nonneg : forall n d : R, 0 < d -> 0 <= n -> 0 <= n / d.
Proof.
  intros n d Hd H. apply Rmult_le_pos; [exact H |].
  apply Rlt_le. apply Rinv_0_lt_compat. exact Hd.
Qed.

Lemma zero_sum : forall a b : R, a = 0 -> b = 0 -> a + b = 0.
Proof. intros a b Ha Hb. rewrite Ha, Hb. ring. Qed.

Lemma zero_product : forall c h : R, h = 0 -> c * h = 0.
Proof. intros c h H. rewrite H. ring. Qed.

Lemma divide_out : forall m p : R, 0 < m -> 0 <= m * p -> 0 <= p.
Proof.
  intros m p Hm H. apply Rmult_le_reg_l with m; [exact Hm |].
  rewrite Rmult_0_r. exact H.
Qed.

Lemma from_identity : forall d v s z : R,
  0 < d -> 0 <= s -> z = 0 -> d * v = s + z -> 0 <= v.
Proof.
  intros d v s z Hd Hs Hz E. apply (divide_out d); [exact Hd |].
  rewrite E, Hz, Rplus_0_r. exact Hs.
Qed.

Lemma from_gap : forall l r p s : R,
  0 < s -> 0 <= p -> r - l = p / s -> l <= r.
Proof.
  intros l r p s Hs Hp E. pose proof (quotient_nonneg p s Hs Hp) as H.
  rewrite <- E in H. lra.
Qed.

Lemma from_gap_modulo : forall l r p s z d : R,
  0 < s -> 0 <= p -> z = 0 -> r - l = p / s + z / d -> l <= r.
Proof.
  intros l r p s z d Hs Hp Hz E. apply (from_gap l r p s Hs Hp).
  rewrite E, Hz. unfold Rdiv. ring.
Qed.

Lemma from_squares : forall x y : R, 0 <= x -> y * y <= x * x -> y <= x.
Proof.
  intros x y Hx H. apply Rsqr_incr_0_var; [unfold Rsqr; exact H | exact Hx].
Qed.

Lemma by_squaring : forall d v x y z k g : R,
  0 < d -> 0 <= x -> z = 0 -> d * v = x - y + z ->
  0 < k -> 0 <= g -> x * x - y * y = k * g -> 0 <= v.
Proof.
  intros d v x y z k g Hd Hx Hz E Hk Hg S. apply (divide_out d); [exact Hd |].
  rewrite E, Hz. pose proof (product_nonneg k g (Rlt_le _ _ Hk) Hg) as H.
  rewrite <- S in H. pose proof (from_squares x y Hx) as L. lra.
Qed.

(* Comparisons of numbers, from the value of left - right. *)
Lemma less_from_value : forall l r c : R, c < 0 -> l - r = c -> l < r.
Proof. intros l r c Hc E. apply Rminus_lt. rewrite E. exact Hc. Qed.

Lemma at_most_from_value : forall l r c : R, c <= 0 -> l - r = c -> l <= r.
Proof. intros l r c Hc E. apply Rminus_le. rewrite E. exact Hc. Qed.

Lemma equal_from_value : forall l r c : R, c = 0 -> l - r = c -> l = r.
Proof. intros l r c Hc E. apply Rminus_diag_uniq. rewrite E. exact Hc. Qed.

Lemma at_least_from_value : forall l r c : R, c >= 0 -> l - r = c -> l >= r.
Proof. intros l r c Hc E. lra. Qed.

Lemma greater_from_value : forall l r c : R, c > 0 -> l - r = c -> l > r.
Proof. intros l r c Hc E. lra. Qed.

Lemma fails_above : forall l r k b x : R,
  0 < k -> b < x -> r - l = k * (b - x) -> r < l.
Proof.
  intros l r k b x Hk Hx E.
  assert (H : 0 < k * (x - b)) by (apply product_pos; lra). lra.
Qed.

Lemma fails_below : forall l r k b x : R,
  0 < k -> x < b -> r - l = k * (x - b) -> r < l.
Proof.
  intros l r k b x Hk Hx E.
  assert (H : 0 < k * (b - x)) by (apply product_pos; lra). lra.
Qed.

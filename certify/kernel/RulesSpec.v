(** * What the words of a rule mean *)

From Coq Require Import Bool List ZArith Znumtheory Lia.
From Certify Require Import Rules.
Import ListNotations.
Open Scope Z_scope.

(** ** Ranges, rows, sets *)

Lemma in_count_up : forall n lo k, In k (count_up n lo) <-> lo <= k < lo + Z.of_nat n.
Proof.
  induction n as [|n IH]; intros lo k; simpl In.
  - lia.
  - rewrite IH. lia.
Qed.

Lemma in_range : forall lo hi k, In k (range lo hi) <-> lo <= k <= hi.
Proof. intros. unfold range. rewrite in_count_up. lia. Qed.

Lemma in_extend : forall (A B : Type) (rows : list A) (f : A -> list B) a b,
  In (a, b) (extend rows f) <-> In a rows /\ In b (f a).
Proof.
  intros A B rows f a b. unfold extend. rewrite in_flat_map. split.
  - intros (row & Hrow & Hin). apply in_map_iff in Hin.
    destruct Hin as (value & Heq & Hin). injection Heq as -> ->. auto.
  - intros [Ha Hb]. exists a. split; [exact Ha|]. now apply in_map.
Qed.

Lemma member_spec : forall i l, member i l = true <-> In i l.
Proof.
  intros i l. induction l as [|j l IH]; simpl.
  - intuition discriminate.
  - destruct (Z.eqb_spec i j); intuition congruence.
Qed.

Lemma same_set_spec : forall l m, same_set l m = true <-> (forall i, In i l <-> In i m).
Proof.
  intros l m. unfold same_set. rewrite <- andb_lazy_alt, andb_true_iff, !forallb_forall.
  setoid_rewrite member_spec. firstorder.
Qed.

(** Division rounds down, so that a remainder has the sign of the divisor. *)
Lemma division : forall i j, j <> 0 ->
  i = j * (i / j) + i mod j /\ (0 <= i mod j < j \/ j < i mod j <= 0).
Proof.
  intros i j Hj. split.
  - now apply Z.div_mod.
  - destruct (Z.lt_trichotomy j 0) as [Hneg | [Hzero | Hpos]].
    + right. pose proof (Z.mod_neg_bound i j Hneg). lia.
    + contradiction.
    + left. now apply Z.mod_pos_bound.
Qed.

(** ** Figurate numbers *)

Lemma square_spec : forall i, square i = true <-> exists k, 0 <= k /\ i = k * k.
Proof.
  intros i. unfold square. rewrite Z.eqb_eq. split.
  - intros H. exists (Z.sqrt i). split; [apply Z.sqrt_nonneg | congruence].
  - intros (k & Hk & ->). now rewrite Z.sqrt_square.
Qed.

(** Twice a number, halved. *)
Lemma half : forall i j, Z.Even j -> (2 * i = j <-> i = j / 2).
Proof.
  intros i j [k ->]. rewrite (Z.mul_comm 2 k), Z.div_mul by lia. lia.
Qed.

Lemma even_product : forall k c, Z.Odd c -> Z.Even (k * (c * k + 1)).
Proof.
  intros k c [d ->]. destruct (Z.Even_or_Odd k) as [[m ->] | [m ->]].
  - exists (m * ((2 * d + 1) * (2 * m) + 1)). ring.
  - exists ((2 * m + 1) * ((2 * d + 1) * m + d + 1)). ring.
Qed.

Lemma triangular_spec : forall i,
  triangular i = true <-> exists k, 0 <= k /\ i = k * (k + 1) / 2.
Proof.
  intros i. unfold triangular. rewrite Z.eqb_eq.
  assert (Heven : forall k, Z.Even (k * (k + 1))).
  { intros k. replace (k * (k + 1)) with (k * (1 * k + 1)) by ring.
    apply even_product. now exists 0. }
  setoid_rewrite <- half; [|apply Heven]. split.
  - intros H. set (k := (Z.sqrt (8 * i + 1) - 1) / 2) in *.
    pose proof (Z.sqrt_nonneg (8 * i + 1)).
    assert (-1 <= k) by (apply Z.div_le_lower_bound; lia).
    destruct (Z.eq_dec k (-1)) as [->|]; [exists 0 | exists k]; lia.
  - intros (k & Hk & Hi).
    replace (8 * i + 1) with ((2 * k + 1) * (2 * k + 1)) by lia.
    rewrite Z.sqrt_square by lia.
    replace (2 * k + 1 - 1) with (k * 2) by ring. rewrite Z.div_mul; lia.
Qed.

Lemma pentagonal_spec : forall i,
  pentagonal i = true <-> exists k, 0 <= k /\ i = k * (3 * k - 1) / 2.
Proof.
  intros i. unfold pentagonal. rewrite Z.eqb_eq.
  assert (Heven : forall k, Z.Even (k * (3 * k - 1))).
  { intros k. replace (k * (3 * k - 1)) with (- k * (3 * - k + 1)) by ring.
    apply even_product. now exists 1. }
  setoid_rewrite <- half; [|apply Heven]. split.
  - intros H. exists ((Z.sqrt (24 * i + 1) + 1) / 6).
    pose proof (Z.sqrt_nonneg (24 * i + 1)).
    split; [apply Z.div_pos; lia | lia].
  - intros (k & Hk & Hi).
    replace (24 * i + 1) with (Z.abs (6 * k - 1) * Z.abs (6 * k - 1))
      by (rewrite <- Z.abs_mul, Z.abs_eq; lia || nia).
    rewrite Z.sqrt_square by lia.
    destruct (Z.eq_dec k 0) as [->|]; [now subst|].
    rewrite Z.abs_eq by lia.
    replace (6 * k - 1 + 1) with (k * 6) by ring. rewrite Z.div_mul; lia.
Qed.

(** ** Powers *)

Lemma root_loop_spec : forall fuel e i, 1 <= e -> 0 <= i < 2 ^ Z.of_nat fuel ->
  0 <= root_loop fuel e i /\ root_loop fuel e i ^ e <= i < (root_loop fuel e i + 1) ^ e.
Proof.
  induction fuel as [|fuel IH]; intros e i He Hi; cbn [root_loop].
  - change (2 ^ Z.of_nat 0) with 1 in Hi.
    replace (0 ^ e) with 0 by (symmetry; apply Z.pow_0_l; lia).
    change (0 + 1) with 1. rewrite Z.pow_1_l; lia.
  - destruct (Z.leb_spec i 0) as [Hzero|Hpos].
    { replace (0 ^ e) with 0 by (symmetry; apply Z.pow_0_l; lia).
      change (0 + 1) with 1. rewrite Z.pow_1_l; lia. }
    assert (Htwo : 2 <= 2 ^ e) by (change 2 with (2 ^ 1) at 1; apply Z.pow_le_mono_r; lia).
    destruct (IH e (i / 2 ^ e) He) as (Hk & Hlow & Hhigh).
    { rewrite Nat2Z.inj_succ, Z.pow_succ_r in Hi by lia. split.
      - apply Z.div_pos; lia.
      - apply Z.div_lt_upper_bound; nia. }
    set (k := root_loop fuel e (i / 2 ^ e)) in *. clearbody k.
    assert (Hbelow : (2 * k) ^ e <= i).
    { rewrite Z.pow_mul_l. transitivity (2 ^ e * (i / 2 ^ e)).
      - apply Z.mul_le_mono_nonneg_l; lia.
      - apply Z.mul_div_le. lia. }
    assert (Habove : i < (2 * k + 1 + 1) ^ e).
    { replace (2 * k + 1 + 1) with (2 * (k + 1)) by ring. rewrite Z.pow_mul_l.
      pose proof (Z.mul_succ_div_gt i (2 ^ e) ltac:(lia)).
      apply Z.lt_le_trans with (2 ^ e * Z.succ (i / 2 ^ e)); [lia|].
      apply Z.mul_le_mono_nonneg_l; lia. }
    destruct (Z.leb_spec ((2 * k + 1) ^ e) i); lia.
Qed.

Lemma root_power : forall e k, 1 <= e -> 0 <= k -> root e (k ^ e) = k.
Proof.
  intros e k He Hk. unfold root.
  assert (Hpos : 0 <= k ^ e) by (apply Z.pow_nonneg; lia).
  set (fuel := Z.to_nat (Z.log2 (k ^ e) + 1)).
  assert (Hfuel : Z.of_nat fuel = Z.log2 (k ^ e) + 1).
  { unfold fuel. pose proof (Z.log2_nonneg (k ^ e)). lia. }
  assert (Hbound : k ^ e < 2 ^ Z.of_nat fuel).
  { rewrite Hfuel, Z.add_1_r. destruct (Z.eq_dec (k ^ e) 0) as [->|]; [reflexivity|].
    apply Z.log2_spec. lia. }
  destruct (root_loop_spec fuel e (k ^ e) He ltac:(lia)) as (Hr & Hlow & Hhigh).
  set (r := root_loop fuel e (k ^ e)) in *. clearbody r.
  assert (r <= k).
  { destruct (Z.le_gt_cases r k) as [|Hlt]; [assumption|].
    pose proof (Z.pow_lt_mono_l k r e). lia. }
  assert (k < r + 1).
  { destruct (Z.lt_ge_cases k (r + 1)) as [|Hge]; [assumption|].
    pose proof (Z.pow_le_mono_l (r + 1) k e). lia. }
  lia.
Qed.

Lemma cube_spec : forall i, cube i = true <-> exists k, i = k ^ 3.
Proof.
  intros i. unfold cube. rewrite Z.eqb_eq. split.
  - intros H. set (k := root 3 (Z.abs i)) in *. clearbody k.
    destruct (Z.abs_spec i) as [[_ Hi] | [_ Hi]]; rewrite Hi in H.
    + now exists k.
    + exists (- k). transitivity (- k ^ 3); [lia | ring].
  - intros [k ->].
    assert (Habs : Z.abs (k ^ 3) = Z.abs k ^ 3).
    { replace (k ^ 3) with (k * k * k) by ring.
      replace (Z.abs k ^ 3) with (Z.abs k * Z.abs k * Z.abs k) by ring.
      now rewrite !Z.abs_mul. }
    rewrite Habs, root_power; lia.
Qed.

Lemma power_spec : forall i,
  power i = true <-> exists k e, 1 <= k /\ 2 <= e /\ i = k ^ e.
Proof.
  intros i. unfold power. rewrite <- orb_lazy_alt, orb_true_iff, Z.eqb_eq, existsb_exists.
  split.
  - intros [-> | (e & He & Hroot)].
    + exists 1, 2. lia.
    + apply in_range in He. apply Z.eqb_eq in Hroot.
      assert (Hi : 0 < i).
      { destruct (Z.lt_ge_cases 0 i) as [|Hneg]; [assumption|].
        rewrite Z.log2_nonpos in He; lia. }
      exists (root e i), e. repeat split; [|lia|now symmetry].
      assert (Hlog : i < 2 ^ Z.of_nat (Z.to_nat (Z.log2 i + 1))).
      { pose proof (Z.log2_nonneg i).
        rewrite Z2Nat.id, Z.add_1_r by lia. now apply Z.log2_spec. }
      destruct (root_loop_spec (Z.to_nat (Z.log2 i + 1)) e i ltac:(lia) ltac:(lia))
        as (Hr & _ & _). fold (root e i) in Hr.
      destruct (Z.eq_dec (root e i) 0) as [Hz|]; [|lia].
      rewrite Hz, Z.pow_0_l in Hroot; lia.
  - intros (k & e & Hk & He & Hi).
    destruct (Z.eq_dec k 1) as [->|Hk1].
    + left. rewrite Z.pow_1_l in Hi; lia.
    + right. exists e. split.
      * apply in_range. split; [exact He|].
        rewrite <- (Z.log2_pow2 e) by lia. apply Z.log2_le_mono.
        subst i. apply Z.pow_le_mono_l. lia.
      * apply Z.eqb_eq. rewrite Hi, root_power; lia.
Qed.

(** ** Fibonacci numbers *)

Fixpoint fib (n : nat) : Z :=
  match n with
  | O => 0
  | S n' => match n' with
            | O => 1
            | S n'' => fib n' + fib n''
            end
  end.

Lemma fib_step : forall n, fib (S (S n)) = fib (S n) + fib n.
Proof. reflexivity. Qed.

Lemma fib_rises : forall n, 0 <= fib n <= fib (S n) /\ 1 <= fib (S n).
Proof.
  induction n as [|n IH].
  - simpl. lia.
  - rewrite fib_step. lia.
Qed.

Lemma fib_mono : forall m n, (m <= n)%nat -> fib m <= fib n.
Proof.
  intros m n H. induction H as [|n H IH]; [lia|].
  pose proof (fib_rises n). lia.
Qed.

Lemma fib_doubles : forall k, 2 ^ Z.of_nat k <= fib (2 * k + 2).
Proof.
  induction k as [|k IH]; [simpl; lia|].
  replace (2 * S k + 2)%nat with (S (S (2 * k + 2))) by lia.
  rewrite fib_step, Nat2Z.inj_succ, Z.pow_succ_r by lia.
  pose proof (fib_rises (2 * k + 2)). lia.
Qed.

Lemma fibonacci_loop_spec : forall fuel n i,
  (forall m, (m < n)%nat -> fib m < i) -> i <= fib (n + fuel - 1) -> (1 <= fuel)%nat ->
  fibonacci_loop fuel i (fib n) (fib (S n)) = true <-> exists m, i = fib m.
Proof.
  induction fuel as [|fuel IH]; intros n i Hbelow Habove Hfuel; [lia|].
  cbn [fibonacci_loop]. destruct (Z.leb_spec i (fib n)) as [Hle|Hgt].
  - rewrite Z.eqb_eq. split; [now exists n|]. intros [m ->].
    destruct (le_lt_dec n m) as [Hnm|Hmn].
    + pose proof (fib_mono n m Hnm). lia.
    + specialize (Hbelow m Hmn). lia.
  - assert (1 <= fuel)%nat.
    { destruct fuel; [|lia]. replace (n + 1 - 1)%nat with n in Habove by lia. lia. }
    rewrite (Z.add_comm (fib n)), <- fib_step. apply IH.
    + intros m Hm. destruct (Nat.eq_dec m n) as [->|]; [lia|]. apply Hbelow. lia.
    + replace (S n + fuel - 1)%nat with (n + S fuel - 1)%nat by lia. exact Habove.
    + assumption.
Qed.

Lemma fibonacci_spec : forall i, fibonacci i = true <-> exists n, i = fib n.
Proof.
  intros i. unfold fibonacci. destruct (Z.leb_spec 0 i) as [Hi|Hneg].
  - change 0 with (fib 0). change 1 with (fib 1). apply fibonacci_loop_spec; [lia| |lia].
    replace (0 + (2 * Z.to_nat (Z.log2 i) + 5) - 1)%nat
      with (2 * S (Z.to_nat (Z.log2 i)) + 2)%nat by lia.
    destruct (Z.eq_dec i 0) as [->|Hpos]; [apply fib_rises|].
    destruct (Z.log2_spec i ltac:(lia)) as [_ Hlog].
    pose proof (fib_doubles (S (Z.to_nat (Z.log2 i)))) as Hdouble.
    rewrite Nat2Z.inj_succ, Z2Nat.id in Hdouble by apply Z.log2_nonneg. lia.
  - split; [discriminate|]. intros [n ->]. pose proof (fib_rises n). lia.
Qed.

(** ** Primes *)

(** A number that is not prime has a divisor up to its root. *)
Lemma prime_by_root : forall d i, 1 < i -> 0 <= d -> i < d * d ->
  (forall c, 2 <= c < d -> ~ (c | i)) -> Znumtheory.prime i.
Proof.
  intros d i Hi Hd Hroot Hnone. apply prime_alt. split; [exact Hi|].
  intros c Hc [q Hq].
  destruct (Z.lt_ge_cases c d) as [Hlt|Hge].
  - apply (Hnone c); [lia | now exists q].
  - apply (Hnone q); [nia | exists c; lia].
Qed.

Lemma undivided_loop_spec : forall fuel d i,
  Z.Odd i -> 3 <= i -> Z.Odd d -> 3 <= d -> Z.sqrt i < d + 2 * Z.of_nat fuel ->
  (forall c, 2 <= c < d -> ~ (c | i)) ->
  undivided_loop fuel d i = true <-> Znumtheory.prime i.
Proof.
  induction fuel as [|fuel IH]; intros d i Hiodd Hi Hdodd Hd Hfuel Hnone; cbn [undivided_loop].
  - split; [intros _ | reflexivity]. apply (prime_by_root d); try assumption; try lia.
    apply Z.sqrt_lt_square; lia.
  - destruct (Z.ltb_spec i (d * d)) as [Hlt|Hge].
    { split; [intros _ | reflexivity]. apply (prime_by_root d); try assumption; lia. }
    destruct (Z.eqb_spec (i mod d) 0) as [Hzero|Hrest]; cbn [negb].
    { split; [discriminate|]. intros Hprime. apply prime_alt in Hprime.
      exfalso. apply (proj2 Hprime d); [nia|]. apply Z.mod_divide; lia. }
    apply IH; try assumption; try lia.
    + destruct Hdodd as [k ->]. exists (k + 1). lia.
    + intros c Hc Hdiv.
      destruct (Z.lt_ge_cases c d) as [|Hcd]; [now apply (Hnone c)|].
      destruct (Z.eq_dec c d) as [->|Hother].
      * apply Hrest. apply Z.mod_divide; [lia | assumption].
      * destruct Hdodd as [k Hk], Hdiv as [q Hq], Hiodd as [j Hj].
        replace c with (2 * (k + 1)) in Hq by lia. lia.
Qed.

Lemma prime_spec : forall i, prime i = true <-> Znumtheory.prime i.
Proof.
  intros i. unfold prime. destruct (Z.eqb_spec i 2) as [->|Htwo].
  { split; [intros _; apply prime_2 | reflexivity]. }
  destruct (Z.leb_spec 3 i) as [Hi|Hsmall].
  - destruct (Z.odd i) eqn:Hodd.
    + apply Z.odd_spec in Hodd. apply undivided_loop_spec; try assumption; try lia.
      * now exists 1.
      * intros c Hc [q Hq]. replace c with 2 in Hq by lia. destruct Hodd as [j Hj]. lia.
    + split; [discriminate|]. intros Hprime. apply prime_alt in Hprime.
      exfalso. apply (proj2 Hprime 2); [lia|].
      rewrite <- Z.negb_even in Hodd. apply negb_false_iff, Z.even_spec in Hodd.
      destruct Hodd as [k ->]. exists k. ring.
  - split; [discriminate|]. intros Hprime. destruct Hprime. lia.
Qed.

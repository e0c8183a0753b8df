(** * Endless claims: strips

    The vertices of a strip lie in layers, one for each whole number from [low] to [n + up]. One
    more [period] of layers changes nothing but the length: near the low end the
    graphs of n and n + period are the same, and beyond, the one is the other, moved. For a
    rule that looks at differences, or at residues modulo the period, this is shown by
    arithmetic, once for all n (the hypotheses of [like_strip]). The rest is computed. *)

From Coq Require Import Bool List Arith ZArith Permutation Lia.
From Certify Require Import Statement Rules RulesSpec Normal Sweep SweepChain
  EndlessPlan EndlessNames EndlessSteps EndlessTour EndlessQuery EndlessGrow.
Import ListNotations.
Open Scope Z_scope.

(** [layer x]: its vertices, at most [height]. An edge leads at most [span] layers further,
    except to the last [zone] layers, which are fixed (for rings). [move] moves a vertex
    by one period. The claim is about all n from [least] on. From [enough] on the graphs are
    like each other, with the period put in after the layer [cut]. *)
Record strip (V : Type) := {
  layer : Z -> list V;
  move : V -> V;
  low : Z;
  up : Z;
  height : nat;
  span : nat;
  zone : Z;
  period : Z;
  least : Z;
  enough : Z;
  cut : Z
}.

Arguments layer {V}.
Arguments move {V}.
Arguments low {V}.
Arguments up {V}.
Arguments height {V}.
Arguments span {V}.
Arguments zone {V}.
Arguments period {V}.
Arguments least {V}.
Arguments enough {V}.
Arguments cut {V}.

Section Strip.

Context {V : Type}.
Variable Q : Z -> query V.
Variable path : bool.
Variable G : strip V.

Definition layers (lo hi : Z) : list V := flat_map (layer G) (range lo hi).

(** The last layer, and the last one of the body. *)
Definition final (n : Z) : Z := n + up G.
Definition inner_final (n : Z) : Z := final n - zone G.

Record like_strip : Prop := {
  plain_queries : forall n, least G <= n -> plain (Q n);
  all_layers : forall n, least G <= n ->
    Permutation (vertices (Q n)) (layers (low G) (final n));
  layer_size : forall x, (length (layer G x) <= height G)%nat;
  layer_move : forall x, cut G - period G < x ->
    layer G (x + period G) = map (move G) (layer G x);
  far_layers : forall n x y a b, enough G <= n ->
    low G <= x -> x + Z.of_nat (span G) < y <= inner_final n ->
    In a (layer G x) -> In b (layer G y) -> adjacent (Q n) a b = false;
  same_begin : forall n x y a b, enough G <= n ->
    low G <= x <= cut G -> low G <= y <= inner_final n ->
    In a (layer G x) -> In b (layer G y) ->
    adjacent (Q (n + period G)) a b = adjacent (Q n) a b;
  same_zone : forall n x y a b, enough G <= n ->
    low G <= x <= cut G -> inner_final n < y <= final n ->
    In a (layer G x) -> In b (layer G y) ->
    adjacent (Q (n + period G)) a (move G b) = adjacent (Q n) a b;
  same_moved : forall n x y a b, enough G <= n ->
    cut G - period G < x <= final n -> cut G - period G < y <= final n ->
    In a (layer G x) -> In b (layer G y) ->
    adjacent (Q (n + period G)) (move G a) (move G b) = adjacent (Q n) a b
}.

(** ** What is computed *)

Definition width : nat := S (span G) * height G - 1.

Definition body (n : Z) : list (option V) := map Some (layers (low G) (inner_final n)).
Definition fixed (n : Z) : list (option V) :=
  apex path ++ map Some (layers (inner_final n + 1) (final n)).

Definition body_plan (n : Z) : list item := plan (lifted (Q n)) (fixed n) width (body n).
Definition fixed_plan (n : Z) : list item :=
  plan (lifted (Q n)) [] (length (fixed n)) (fixed n).

(** The numbers make sense: the layers up to [cut], a period of them and more, and then more
    vertices than the window has. *)
Definition sizes_fine : bool :=
  (least G <=? enough G) && (0 <=? zone G) && (1 <=? period G) && (low G <=? cut G - period G + 1)
  && (cut G <=? inner_final (enough G)) && (1 <=? width)%nat
  && (Nat.max 2 width <? length (layers (cut G + 1) (inner_final (enough G))))%nat.

(** The class of [n0]: all n0 + m * period. *)
Definition check_class (n0 : Z) (preperiod again : nat) (claimed : Z -> bool) : bool :=
  let items := body_plan n0 in
  let c := length (layers (low G) (cut G)) in
  let c' := length (layers (low G) (cut G - period G)) in
  let first := first_name (fixed n0) in
  let block := firstn (c - c') (skipn c' items) in
  let right := skipn c items in
  let ss := run first width (firstn c items) [start (fixed n0) width (body n0)] in
  check_answers first (length (fixed n0)) width block right (fixed_plan n0) ss preperiod again
    (map (fun m => claimed (n0 + Z.of_nat m * period G)) (seq 0 (preperiod + again))).

(** ** One period more *)

Hypothesis is_strip : like_strip.
Hypothesis sizes : sizes_fine = true.

Lemma sizes_spec :
  least G <= enough G /\ 0 <= zone G /\ 1 <= period G /\ low G <= cut G - period G + 1 /\
  cut G <= inner_final (enough G) /\ (1 <= width)%nat /\
  (Nat.max 2 width < length (layers (cut G + 1) (inner_final (enough G))))%nat.
Proof.
  unfold sizes_fine in sizes. rewrite !andb_true_iff, !Z.leb_le, Nat.leb_le, Nat.ltb_lt in sizes.
  tauto.
Qed.

Lemma count_up_app : forall m k lo,
  count_up (m + k) lo = count_up m lo ++ count_up k (lo + Z.of_nat m).
Proof.
  induction m as [| m IH]; intros k lo; [cbn; now rewrite Z.add_0_r |].
  cbn [Nat.add count_up app]. rewrite IH. do 3 f_equal. lia.
Qed.

Lemma range_app : forall lo mid hi, lo <= mid + 1 -> mid <= hi ->
  range lo hi = range lo mid ++ range (mid + 1) hi.
Proof.
  intros lo mid hi low_mid mid_high. unfold range.
  replace (Z.to_nat (hi - lo + 1))
    with (Z.to_nat (mid - lo + 1) + Z.to_nat (hi - (mid + 1) + 1))%nat by lia.
  rewrite count_up_app. do 2 f_equal. lia.
Qed.

Lemma layers_app : forall lo mid hi, lo <= mid + 1 -> mid <= hi ->
  layers lo hi = layers lo mid ++ layers (mid + 1) hi.
Proof. intros. unfold layers. rewrite (range_app lo mid hi) by assumption. apply flat_map_app. Qed.

Lemma layers_move : forall lo hi, cut G - period G < lo ->
  layers (lo + period G) (hi + period G) = map (move G) (layers lo hi).
Proof.
  intros lo hi. unfold layers, range.
  replace (hi + period G - (lo + period G) + 1) with (hi - lo + 1) by lia.
  generalize (Z.to_nat (hi - lo + 1)) as m. intros m. revert lo.
  induction m as [| m IH]; intros lo beyond; [reflexivity |].
  cbn [count_up flat_map]. rewrite map_app, (layer_move is_strip) by exact beyond. f_equal.
  replace (lo + period G + 1) with (lo + 1 + period G) by lia. apply IH. lia.
Qed.

Lemma in_layers : forall lo hi a, In a (layers lo hi) <->
  exists x, lo <= x <= hi /\ In a (layer G x).
Proof. intros lo hi a. unfold layers. rewrite in_flat_map. setoid_rewrite in_range. easy. Qed.

Lemma layers_size : forall lo hi, (length (layers lo hi) <= Z.to_nat (hi - lo + 1) * height G)%nat.
Proof.
  intros lo hi. unfold layers, range. generalize (Z.to_nat (hi - lo + 1)) as m. intros m. revert lo.
  induction m as [| m IH]; intros lo; [easy |].
  cbn [count_up flat_map]. rewrite app_length. specialize (IH (lo + 1)).
  pose proof (layer_size is_strip lo). lia.
Qed.

Lemma skipn_in : forall (A : Type) m (l r : list A) x,
  (length l <= m)%nat -> In x (skipn m (l ++ r)) -> In x r.
Proof.
  intros A m l r x short here. rewrite skipn_app, skipn_all2 in here by exact short.
  cbn [app] in here. rewrite <- (firstn_skipn (m - length l) r). apply in_or_app. now right.
Qed.

(** A vertex of the body, and the layers after its own. *)
Lemma layers_split : forall lo hi done b rest, layers lo hi = done ++ b :: rest ->
  exists x l r, lo <= x <= hi /\ layer G x = l ++ b :: r /\ rest = r ++ layers (x + 1) hi.
Proof.
  intros lo hi. unfold layers, range.
  remember (Z.to_nat (hi - lo + 1)) as m eqn:size. revert lo size.
  induction m as [| m IH]; intros lo size done b rest parts.
  - now destruct done.
  - cbn [count_up flat_map] in parts. apply eq_sym, app_eq_app in parts.
    destruct parts as (k & [[E1 E2] | [E1 E2]]).
    + (* [done] reaches beyond this layer *)
      destruct (IH (lo + 1) ltac:(lia) k b rest E2) as (x & l & r & bounds & here & rest_is).
      exists x, l, r. split; [lia | now split].
    + destruct k as [| b' k].
      * cbn [app] in E2.
        destruct (IH (lo + 1) ltac:(lia) [] b rest (eq_sym E2))
          as (x & l & r & bounds & here & rest_is).
        exists x, l, r. split; [lia | now split].
      * cbn [app] in E2. injection E2 as <- ->. exists lo, done, k.
        split; [lia |]. split; [exact E1 |].
        replace (Z.to_nat (hi - (lo + 1) + 1)) with m by lia. reflexivity.
Qed.

Lemma body_short : forall n, enough G <= n -> reach_short (lifted (Q n)) (body n) width.
Proof.
  intros n large done b rest parts x here. unfold body in parts.
  apply map_eq_app in parts as (done' & tail & parts & _ & tail_is).
  apply map_eq_cons in tail_is as (b' & rest' & -> & <- & <-).
  rewrite skipn_map in here. apply in_map_iff in here as (x' & <- & here).
  destruct (layers_split _ _ _ _ _ parts) as (z & l & r & bounds & z_is & rest_is).
  cbn [lifted].
  assert (one : (length r < height G)%nat).
  { pose proof (layer_size is_strip z) as size. rewrite z_is, app_length in size.
    cbn [length] in size. lia. }
  set (far := Z.min (inner_final n) (z + Z.of_nat (span G))).
  rewrite rest_is, (layers_app (z + 1) far (inner_final n)), app_assoc in here by lia.
  apply skipn_in in here.
  - apply in_layers in here as (y & y_bounds & y_here).
    apply (far_layers is_strip n z y); try assumption; [lia | lia |].
    rewrite z_is. apply in_or_app. right. now left.
  - rewrite app_length. pose proof (layers_size (z + 1) far) as some.
    assert (few : (Z.to_nat (far - (z + 1) + 1) <= span G)%nat) by lia.
    apply (Nat.mul_le_mono_r _ _ (height G)) in few. unfold width. lia.
Qed.

End Strip.

Arguments plain_queries {V Q G}.
Arguments all_layers {V Q G}.
Arguments same_begin {V Q G}.
Arguments same_zone {V Q G}.
Arguments same_moved {V Q G}.
Arguments sizes_spec {V G}.
Arguments layers_app {V G}.
Arguments in_layers {V G}.

(** * Endless claims: longer strips

    With one period of layers more the plan of a strip has a block of items more, and nothing else
    is new: so the answers of a class of n, one period apart, are those of EndlessGrow.v. *)

From Coq Require Import Bool List Arith ZArith Permutation Lia.
From Certify Require Import Statement Rules RulesSpec Normal Sweep SweepChain
  EndlessPlan EndlessNames EndlessSteps EndlessTour EndlessQuery EndlessGrow EndlessLayers.
Import ListNotations.
Open Scope Z_scope.

Section Strip.

Context {V : Type}.
Variable Q : Z -> query V.
Variable path : bool.
Variable G : strip V.
Hypothesis is_strip : like_strip Q G.
Hypothesis sizes : sizes_fine G = true.

Local Notation layers := (layers G).
Local Notation final := (final G).
Local Notation inner_final := (inner_final G).
Local Notation width := (width G).
Local Notation body := (body G).
Local Notation fixed := (fixed path G).
Local Notation body_plan := (body_plan Q path G).
Local Notation fixed_plan := (fixed_plan Q path G).

Let some_move := option_map (move G).

Lemma fixed_next : forall n, enough G <= n -> fixed (n + period G) = map some_move (fixed n).
Proof.
  intros n large. pose proof (sizes_spec sizes) as (? & ? & ? & ? & ? & _).
  unfold fixed, some_move. rewrite map_app. f_equal; [now destruct path |].
  unfold inner_final, final in *.
  replace (n + period G + up G - zone G + 1) with (n + up G - zone G + 1 + period G) by lia.
  replace (n + period G + up G) with (n + up G + period G) by lia.
  rewrite (layers_move Q G is_strip) by lia. now rewrite !map_map.
Qed.

Lemma in_fixed : forall n f, In f (fixed n) ->
  (f = None /\ path = true) \/
  exists y b, f = Some b /\ inner_final n < y <= final n /\ In b (layer G y).
Proof.
  intros n f here. unfold fixed in here. apply in_app_or in here as [here | here].
  - destruct path; [| easy]. destruct here as [<- | []]. now left.
  - apply in_map_iff in here as (b & <- & here). apply in_layers in here as (y & bounds & here).
    right. exists y, b. split; [easy |]. split; [lia | exact here].
Qed.

Lemma in_some : forall lo hi f, In f (map Some (layers lo hi)) ->
  exists y b, f = Some b /\ lo <= y <= hi /\ In b (layer G y).
Proof.
  intros lo hi f here. apply in_map_iff in here as (b & <- & here).
  apply in_layers in here as (y & bounds & here). now exists y, b.
Qed.

Lemma moved_meet : forall n f g, enough G <= n ->
  (forall x, f = Some x -> exists y, cut G - period G < y <= final n /\ In x (layer G y)) ->
  (forall x, g = Some x -> exists y, cut G - period G < y <= final n /\ In x (layer G y)) ->
  lifted (Q (n + period G)) (some_move f) (some_move g) = lifted (Q n) f g.
Proof.
  intros n [a |] [b |] large f_here g_here; try reflexivity. cbn [some_move option_map lifted].
  destruct (f_here a eq_refl) as (x & x_bounds & a_here).
  destruct (g_here b eq_refl) as (y & y_bounds & b_here).
  now apply (same_moved is_strip n x y).
Qed.

Lemma fixed_high : forall n f, enough G <= n -> In f (fixed n) ->
  forall x, f = Some x -> exists y, cut G - period G < y <= final n /\ In x (layer G y).
Proof.
  intros n f large here x ->. pose proof (sizes_spec sizes) as (? & ? & ? & ? & ? & _).
  apply in_fixed in here as [[E _] | (y & b & [= ->] & bounds & here)]; [discriminate |].
  exists y. split; [| exact here]. unfold inner_final, final in *. lia.
Qed.

Lemma fixed_plan_next : forall n, enough G <= n -> fixed_plan (n + period G) = fixed_plan n.
Proof.
  intros n large. unfold fixed_plan. rewrite fixed_next, map_length by exact large.
  apply (plan_move (lifted (Q n)) (lifted (Q (n + period G))) some_move []).
  cbn [app]. intros f g f_here g_here.
  apply moved_meet; [exact large | now apply fixed_high | now apply fixed_high].
Qed.

Lemma body_plan_next : forall n, enough G <= n ->
  body_plan (n + period G) =
  firstn (length (layers (low G) (cut G))) (body_plan n)
  ++ skipn (length (layers (low G) (cut G - period G))) (body_plan n).
Proof.
  intros n large.
  pose proof (sizes_spec sizes) as (? & zone_fine & period_fine & low_fine & cut_fine & _ & room).
  assert (high : cut G <= inner_final n) by (unfold inner_final, final in *; lia).
  assert (next : inner_final (n + period G) = inner_final n + period G)
    by (unfold inner_final, final; lia).
  set (l := map (@Some V) (layers (low G) (cut G))).
  set (l' := map (@Some V) (layers (low G) (cut G - period G))).
  set (t := map (@Some V) (layers (cut G + 1) (inner_final n))).
  set (t' := map (@Some V) (layers (cut G - period G + 1) (inner_final n))).
  set (more := map (@Some V) (layers (inner_final n + 1) (inner_final n + period G))).
  assert (body_is : body n = l ++ t).
  { unfold body, l, t. rewrite <- map_app. f_equal. apply layers_app; lia. }
  assert (body_is' : body n = l' ++ t').
  { unfold body, l', t'. rewrite <- map_app. f_equal. apply layers_app; lia. }
  assert (longer : body (n + period G) = l ++ t ++ more).
  { rewrite app_assoc, <- body_is. unfold body, more. rewrite next, <- map_app. f_equal.
    apply layers_app; lia. }
  assert (longer' : body (n + period G) = l ++ map some_move t').
  { unfold body, l, t', some_move. rewrite next, (layers_app _ (cut G)) by lia. rewrite map_app.
    f_equal. replace (cut G + 1) with (cut G - period G + 1 + period G) by lia.
    rewrite (layers_move Q G is_strip) by lia. now rewrite !map_map. }
  assert (size : (width < length t)%nat).
  { unfold t. rewrite map_length, (layers_app _ (inner_final (enough G))), app_length
      by (unfold inner_final, final in *; lia). lia. }
  rewrite <- (firstn_skipn (length l) (body_plan (n + period G))).
  rewrite <- (map_length (@Some V) (layers (low G) (cut G))).
  rewrite <- (map_length (@Some V) (layers (low G) (cut G - period G))).
  fold l l'. unfold body_plan. f_equal.
  - rewrite longer, body_is, fixed_next by exact large.
    apply plan_begin; [exact size | |].
    + intros f g f_here g_here. apply in_some in f_here as (x & a & -> & x_bounds & a_here).
      apply in_fixed in g_here as [[-> _] | (y & b & -> & y_bounds & b_here)]; [reflexivity |].
      now apply (same_zone is_strip n x y).
    + rewrite <- body_is. intros f g f_here g_here.
      apply in_some in f_here as (x & a & -> & x_bounds & a_here).
      unfold body in g_here. apply in_some in g_here as (y & b & -> & y_bounds & b_here).
      now apply (same_begin is_strip n x y).
  - rewrite longer', plan_skip, body_is', plan_skip, fixed_next by exact large.
    apply plan_move. intros f g f_here g_here.
    assert (t_high : forall f, In f t' ->
      forall x, f = Some x -> exists y, cut G - period G < y <= final n /\ In x (layer G y)).
    { intros f' here x ->. apply in_some in here as (y & b & [= ->] & bounds & here).
      exists y. split; [| exact here]. unfold inner_final, final in *. lia. }
    apply moved_meet; [exact large | now apply t_high |].
    apply in_app_or in g_here as [here | here]; [now apply fixed_high | now apply t_high].
Qed.

(** ** All of a class *)

Section Class.

Variable n0 : Z.
Hypothesis large : enough G <= n0.

Let c := length (layers (low G) (cut G)).
Let c' := length (layers (low G) (cut G - period G)).
Let block := firstn (c - c') (skipn c' (body_plan n0)).
Let right := skipn c (body_plan n0).
Let longer (m : nat) := n0 + Z.of_nat m * period G.

Lemma longer_next : forall m, longer (S m) = longer m + period G.
Proof. intros m. unfold longer. lia. Qed.

Lemma longer_enough : forall m, enough G <= longer m.
Proof. intros m. pose proof (sizes_spec sizes). unfold longer. nia. Qed.

Lemma c_order : (c' <= c)%nat /\ (c <= length (body_plan n0))%nat.
Proof.
  pose proof (sizes_spec sizes) as (? & ? & ? & ? & ? & _). unfold c, c', body_plan. split.
  - rewrite (layers_app (low G) (cut G - period G) (cut G)), app_length by lia. lia.
  - rewrite plan_length. unfold body. rewrite map_length.
    rewrite (layers_app (low G) (cut G) (inner_final n0)), app_length
      by (unfold inner_final, final in *; lia). lia.
Qed.

Lemma longer_plan : forall m,
  body_plan (longer m) = firstn c (body_plan n0) ++ repeat_items block m ++ right.
Proof.
  pose proof c_order as [order_c bound_c].
  assert (first_part : firstn c (body_plan n0) = firstn c' (body_plan n0) ++ block).
  { unfold block. rewrite <- (firstn_skipn c' (firstn c (body_plan n0))).
    rewrite firstn_firstn, skipn_firstn_comm, Nat.min_l by exact order_c. reflexivity. }
  induction m as [| m IH].
  - unfold longer. cbn [Z.of_nat Z.mul repeat_items app]. rewrite Z.add_0_r.
    symmetry. apply firstn_skipn.
  - rewrite longer_next, body_plan_next by apply longer_enough. fold c c'. rewrite IH.
    assert (size : length (firstn c (body_plan n0)) = c) by now apply firstn_length_le.
    rewrite firstn_app, size, Nat.sub_diag, firstn_O, app_nil_r.
    rewrite firstn_all2 by lia. f_equal.
    rewrite first_part, <- app_assoc, skipn_app.
    assert (size' : length (firstn c' (body_plan n0)) = c') by (apply firstn_length_le; lia).
    rewrite skipn_all2 by lia. rewrite size', Nat.sub_diag. cbn [skipn app repeat_items].
    now rewrite app_assoc.
Qed.

Lemma longer_fixed : forall m,
  length (fixed (longer m)) = length (fixed n0) /\ fixed_plan (longer m) = fixed_plan n0.
Proof.
  induction m as [| m [size items]].
  - unfold longer. cbn [Z.of_nat Z.mul]. now rewrite Z.add_0_r.
  - rewrite longer_next, fixed_next, fixed_plan_next by apply longer_enough.
    now rewrite map_length.
Qed.

Lemma body_long : forall n, enough G <= n -> (Nat.max 2 width < length (body n))%nat.
Proof.
  intros n enough_n. pose proof (sizes_spec sizes) as (? & ? & ? & ? & ? & _ & room).
  unfold body. rewrite map_length, (layers_app (low G) (cut G)), app_length
    by (unfold inner_final, final in *; lia).
  rewrite (layers_app (cut G + 1) (inner_final (enough G))), app_length
    by (unfold inner_final, final in *; lia). lia.
Qed.

Lemma start_size : forall (l l' m m' : list (option V)), length l = length l' ->
  (width < length m)%nat -> (width < length m')%nat -> start l width m = start l' width m'.
Proof.
  intros l l' m m' same large_m large_m'. unfold start. rewrite <- !(map_map fst alone).
  rewrite !number_names, !app_length, !firstn_length, same. do 4 f_equal. lia.
Qed.

Definition class_states : list state :=
  run (first_name (fixed n0)) width (firstn c (body_plan n0)) [start (fixed n0) width (body n0)].

Lemma longer_answer : forall m, has (Q (longer m)) path <->
  later_answer (first_name (fixed n0)) (length (fixed n0)) width block right (fixed_plan n0)
    class_states m = true.
Proof.
  intros m. assert (large' := longer_enough m). pose proof (longer_fixed m) as [size items].
  pose proof (sizes_spec sizes) as (least_fine & zone_fine & _ & _ & cut_fine & wide & _).
  assert (low_fine : low G <= cut G + 1) by (pose proof (sizes_spec sizes); lia).
  assert (long := body_long (longer m) large'). assert (long0 := body_long n0 large).
  assert (least_m : least G <= longer m) by lia.
  assert (is_plain := plain_queries is_strip _ least_m).
  assert (all : Permutation (vertices (Q (longer m)))
    (layers (inner_final (longer m) + 1) (final (longer m))
     ++ layers (low G) (inner_final (longer m)))).
  { rewrite (all_layers is_strip) by exact least_m.
    rewrite (layers_app _ (inner_final (longer m))).
    - apply Permutation_app_comm.
    - unfold inner_final, final in *. lia.
    - unfold inner_final. lia. }
  rewrite (has_tour (Q (longer m)) is_plain path _ _ all).
  - assert (symmetric := all_sym (Q (longer m)) is_plain path _ _ all).
    change (apex path ++ map Some (layers (inner_final (longer m) + 1) (final (longer m))))
      with (fixed (longer m)) in *.
    change (map Some (layers (low G) (inner_final (longer m)))) with (body (longer m)) in *.
    rewrite <- (answer_spec (lifted (Q (longer m))) (fixed (longer m)) (body (longer m))
                  symmetric width wide).
    + unfold answer, later_answer, class_states.
      change (plan (lifted (Q (longer m))) (fixed (longer m)) width (body (longer m)))
        with (body_plan (longer m)).
      change (plan (lifted (Q (longer m))) [] (length (fixed (longer m))) (fixed (longer m)))
        with (fixed_plan (longer m)).
      rewrite items, longer_plan, !run_app. unfold first_name. rewrite size.
      rewrite (start_size (fixed (longer m)) (fixed n0) (body (longer m)) (body n0)) by (auto; lia).
      reflexivity.
    + now apply (body_short Q G is_strip).
    + rewrite app_length. lia.
  - unfold body in long. rewrite map_length in long. lia.
Qed.

Theorem class_answers : forall preperiod again claimed,
  (1 <= again)%nat ->
  check_class Q path G n0 preperiod again claimed = true ->
  (forall m, (preperiod <= m)%nat -> claimed (longer (m + again)) = claimed (longer m)) ->
  forall m, has (Q (longer m)) path <-> claimed (longer m) = true.
Proof.
  intros mu lambda claimed some checked comes_again.
  apply check_answers_spec in checked as [given cycles].
  fold c c' in given, cycles. fold block right class_states in given, cycles.
  set (found := later_answer (first_name (fixed n0)) (length (fixed n0)) width block right
                  (fixed_plan n0) class_states) in *.
  assert (same : forall m, claimed (longer m) = found m).
  { intros m. induction m as [m IH] using lt_wf_ind.
    destruct (Nat.lt_ge_cases m (mu + lambda)) as [small | big].
    - assert (there := given m small).
      rewrite nth_error_map in there.
      rewrite (nth_error_nth' _ 0%nat) in there by (rewrite seq_length; lia).
      rewrite seq_nth in there by exact small. injection there as there. exact there.
    - replace m with ((m - lambda) + lambda)%nat by lia.
      rewrite comes_again, cycles by lia. apply IH. lia. }
  intros m. rewrite longer_answer. fold found. now rewrite same.
Qed.

End Class.

End Strip.

(** * Why clauses refute a question

    If there were a Hamiltonian cycle, there would be one that no mirror in use maps to an
    earlier one. Give the edges the values that it gives them: then all facts hold, so that
    further variables have values with which all clauses hold. But they contradict each
    other. *)

From Coq Require Import Bool List PArith Arith FMapPositive Lia.
From Certify Require Import Statement Question Edges Facts Sets.
From Certify Require Import Propagation Variables ExactlyTwo Mirror MirrorSound Clauses.
Import ListNotations.

Implicit Types (a b c : variable -> bool) (next free : variable).

Section Sound.

Variable Q : question.
Hypothesis fine : well_formed Q = true.

(** The mirrors among some facts. *)
Definition mirrors (l : list fact) : list (vertex -> vertex) :=
  flat_map (fun f => match f with
                     | Mirror _ image =>
                         if mirror_fine Q (near_edges Q) (read_mirror image)
                         then [apply (forth (read_mirror image))] else []
                     | _ => []
                     end) l.

Lemma mirrors_keep : forall l p, In p (mirrors l) ->
  forall h, cycle Q h -> cycle Q (map p h).
Proof.
  intros l p listed. unfold mirrors in listed. apply in_flat_map in listed as (f & _ & listed).
  destruct f as [v | s | u v | k image]; try easy.
  destruct (mirror_fine _ _ _) eqn:accepted; [| easy].
  destruct listed as [<- | []]. now apply mirror_cycle.
Qed.

Variable h : list vertex.
Hypothesis ham : cycle Q h.

(** ** Each fact holds for the cycle *)

Lemma degree_possible : forall v next a f, (first_free Q <= next)%positive -> agrees Q h a ->
  exactly_two (map snd (around (near_edges Q) v)) next = Some f -> possible next a f.
Proof.
  intros v next a f free same result.
  apply (exactly_two_possible _ next a f result).
  - intros x listed. apply in_map_iff in listed as ([w i] & <- & listed).
    apply (around_in Q fine) in listed. cbn [snd].
    assert (i < first_free Q)%positive; [| lia].
    destruct listed as [listed | listed]; now apply numbered_edge in listed.
  - rewrite (count_around Q fine h a v same). apply (degree_count Q fine h ham).
    destruct (around (near_edges Q) v) as [| [w i] l] eqn:some; [easy |].
    assert (joined Q v w) as edge.
    { assert (In (w, i) (around (near_edges Q) v)) as listed by (rewrite some; now left).
      apply (around_in Q fine) in listed. unfold joined.
      destruct listed as [listed | listed]; apply numbered_edge in listed; tauto. }
    now apply (joined_vertices Q fine v w).
Qed.

Lemma cut_satisfied : forall s c, agrees Q h c -> cut_fine Q s = true ->
  satisfied c (cut_clause Q s).
Proof.
  intros s c same proper. unfold cut_fine in proper.
  rewrite !andb_true_iff, Nat.leb_le, Nat.ltb_lt in proper.
  destruct proper as [[set some] small].
  apply vertex_set_spec in set as [_ part]; [| lia].
  destruct s as [| u s]; [cbn in some; lia |].
  destruct (misses Q (u :: s) small) as (v & v_in & out).
  destruct (cut_leaves Q fine h ham (fun x => PositiveMap.mem x (members (u :: s))) u v)
    as (x & y & x_in & y_out & step).
  - apply part. now left.
  - exact v_in.
  - apply members_spec. now left.
  - apply not_true_iff_false. now rewrite members_spec.
  - assert (exists i e, In (i, e) (numbered_edges Q) /\ (e = (x, y) \/ e = (y, x)))
      as (i & e & listed & way).
    { apply (used_joined Q fine h ham) in step. unfold joined in step.
      destruct step as [edge | edge]; apply (in_number _ _ 1%positive) in edge as [i listed];
        exists i; eexists; (split; [exact listed |]); tauto. }
    exists (xO i). split.
    + apply in_map_iff. exists (i, e). split; [easy |]. apply filter_In. split; [exact listed |].
      unfold leaves. cbn [snd]. destruct way as [-> | ->]; cbn [fst snd]; now rewrite x_in, y_out.
    + cbn [holds]. rewrite (same i e listed).
      apply (uses_spec Q fine h ham) in step. destruct way as [-> | ->]; [exact step |].
      now rewrite (uses_sym Q fine h ham).
Qed.

Lemma required_satisfied : forall u v x c, agrees Q h c -> is_needed Q u v = true ->
  variable_of (near_edges Q) u v = Some x -> satisfied c [xO x].
Proof.
  intros u v x c same listed found.
  assert (uses h (u, v) = true) as step.
  { apply existsb_exists in listed as (e & listed & equal).
    apply pair_eqb_spec in equal as <-. apply (uses_spec Q fine h ham).
    destruct ham as (_ & _ & _ & must). now apply must. }
  exists (xO x). split; [now left |]. cbn [holds].
  apply (variable_of_spec Q fine) in found as [numbered | numbered];
    rewrite (same x _ numbered); [exact step |]. now rewrite (uses_sym Q fine h ham).
Qed.

Lemma mirror_possible : forall k image next a f, (first_free Q <= next)%positive ->
  agrees Q h a ->
  (forall p, In p (mirrors [Mirror k image]) -> not_after h (map p h) (edges Q) = true) ->
  mirror_clauses Q (near_edges Q) k image next = Some f -> possible next a f.
Proof.
  intros k image next a f free same first result. unfold mirror_clauses in result.
  cbn [mirrors flat_map] in first. rewrite app_nil_r in first.
  destruct (mirror_fine _ _ _) eqn:accepted; [| now rewrite andb_false_r in result].
  destruct (length image =? order Q); [| easy]. cbn [andb] in result.
  set (p := read_mirror image) in *.
  destruct (moved _ _) as [places |] eqn:found; [| easy]. injection result as <-.
  apply (no_later_possible _ _ true).
  - easy.
  - intros x y listed. apply take_incl in listed.
    apply (moved_below Q p _ _ (incl_refl _) found) in listed. lia.
  - intros _. apply take_in_order.
    apply (moved_in_order Q fine p accepted h ham a _ _ same (incl_refl _) found).
    unfold numbered_edges. rewrite number_snd. apply first. now left.
Qed.

Lemma agrees_extends : forall next a b, (first_free Q <= next)%positive ->
  agrees Q h a -> extends next a b -> agrees Q h b.
Proof.
  intros next a b free same more i e listed. rewrite <- (same i e listed). apply more.
  apply numbered_edge in listed as [_ below]. lia.
Qed.

Lemma fact_possible : forall f next a r, (first_free Q <= next)%positive -> agrees Q h a ->
  (forall p, In p (mirrors [f]) -> not_after h (map p h) (edges Q) = true) ->
  fact_clauses Q (near_edges Q) f next = Some r -> possible next a r.
Proof.
  intros f next a r free same first result.
  destruct f as [v | s | u v | k image]; cbn [fact_clauses] in result.
  - now apply (degree_possible v).
  - destruct (cut_fine Q s) eqn:proper; [| easy]. injection result as <-.
    apply possible_now. intros c ac d [<- | []].
    apply cut_satisfied; [| exact proper]. now apply (agrees_extends next a).
  - destruct (is_needed Q u v) eqn:listed; [| easy].
    destruct (variable_of _ u v) as [x |] eqn:found; [| easy]. injection result as <-.
    apply possible_now. intros c ac d [<- | []].
    apply (required_satisfied u v); [| exact listed | exact found].
    now apply (agrees_extends next a).
  - now apply (mirror_possible k image).
Qed.

(** ** All facts together, one after the other *)

Lemma all_possible : forall l next a r, (first_free Q <= next)%positive -> agrees Q h a ->
  (forall p, In p (mirrors l) -> not_after h (map p h) (edges Q) = true) ->
  all_clauses Q (near_edges Q) l next = Some r -> possible next a r.
Proof.
  induction l as [| f l IH]; intros next a r free same first result; cbn [all_clauses] in result.
  - injection result as <-. now apply possible_now.
  - destruct (fact_clauses Q _ f next) as [[some later] |] eqn:this; [| easy].
    destruct (all_clauses Q _ l later) as [more |] eqn:others; [| easy]. injection result as <-.
    apply (fact_possible f next a) in this as [further (b & ab & all)]; [| easy | easy |].
    + cbn [fst snd] in *. apply (possible_app next a later b); [easy | easy | exact all |].
      apply (IH later b); [lia | | | exact others].
      * now apply (agrees_extends next a).
      * intros p listed. apply first. unfold mirrors in *. cbn [flat_map].
        apply in_or_app. now right.
    + intros p listed. apply first. unfold mirrors in *. cbn [flat_map] in *.
      rewrite app_nil_r in listed. apply in_or_app. now left.
Qed.

End Sound.

Theorem check_clauses_sound : forall Q proof,
  well_formed Q = true -> check_clauses Q proof = true -> refuted Q.
Proof.
  intros Q proof fine accepted some. unfold check_clauses in accepted.
  destruct (3 <=? order Q); [| easy].
  destruct (clauses_of Q _ (facts proof)) as [[given free] |] eqn:formula; [| easy].
  apply (first_cycle Q (mirrors Q (facts proof)) (mirrors_keep Q fine _)) in some
    as (h & ham & first).
  unfold clauses_of in formula. destruct (facts_sorted _); [| easy].
  apply (all_possible Q fine h ham _ _ (values Q h)) in formula
    as [_ (b & _ & all)]; [| lia | apply values_agree | exact first].
  apply (contradiction b given (steps proof) accepted). intros d listed.
  now apply (all b).
Qed.

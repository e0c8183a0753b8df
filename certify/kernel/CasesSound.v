(** * A tree of cases is sound

    By induction from the leaves up: a Hamiltonian cycle that meets what a node assumes
    fits its state, because forced moves keep it fitting, and meets what one of the
    children assumes; at a leaf there is none. *)

From Coq Require Import Bool List Permutation PArith Arith FMapPositive Lia.
From Certify Require Import Statement Question Edges Facts Sets Obstruction Counting.
From Certify Require Import Forced ForcedPaths ForcedSound Cases.
Import ListNotations.

(** ** The question of a state *)

Lemma sorted_cons : forall e l, sorted_pairs (e :: l) = true <->
  Forall (pair_lt e) l /\ sorted_pairs l = true.
Proof.
  intros e l. revert e. induction l as [|f l IH]; intros e; [easy |].
  change (sorted_pairs (e :: f :: l)) with (pair_ltb e f && sorted_pairs (f :: l)).
  rewrite andb_true_iff, Forall_cons_iff. split; [| tauto].
  intros [L S]. assert (S' := S). apply IH in S' as [A _]. repeat split; auto.
  revert A. apply Forall_impl. intros g. now apply pair_lt_trans.
Qed.

Lemma sorted_filter : forall p l, sorted_pairs l = true -> sorted_pairs (filter p l) = true.
Proof.
  intros p l. induction l as [|e l IH]; [easy |]. intros S. apply sorted_cons in S as [A S].
  simpl. destruct (p e); [| auto]. apply sorted_cons. split; [| auto].
  apply incl_Forall with (l1 := l); [| easy]. intros f. now rewrite filter_In.
Qed.

Lemma subset_more : forall m l e, subset m l = true -> subset m (e :: l) = true.
Proof.
  intros m. induction m as [|f m IH]; [easy |]. intros l e H. rewrite subset_step.
  destruct (pair_eqb _ _); [| easy]. induction l as [|g l IHl]; [easy |].
  apply IH. rewrite subset_step in H. destruct (pair_eqb _ _); auto.
Qed.

Lemma subset_filter : forall p l, subset (filter p l) l = true.
Proof.
  intros p l. induction l as [|e l IH]; [easy |]. simpl filter.
  destruct (p e); [| now apply subset_more]. rewrite subset_step.
  now replace (pair_eqb e e) with true by (symmetry; now apply pair_eqb_spec).
Qed.

Section Sound.

Variable Q : question.
Hypothesis fine : well_formed Q = true.
Hypothesis large : 3 <= order Q.

Notation inside v := (In v (all_vertices (order Q))).

Lemma rest_well_formed : forall s, well_formed (rest_of Q s) = true.
Proof.
  intros s. unfold well_formed, rest_of in *. simpl. destruct (order Q) as [|n]; [lia |].
  apply andb_true_iff in fine as [H _]. apply andb_true_iff in H as [H _].
  apply andb_true_iff in H as [F S]. rewrite !andb_true_iff. repeat split.
  - rewrite forallb_forall in *. intros e He. apply filter_In in He as [He _]. now apply F.
  - now apply sorted_filter.
  - now do 2 apply sorted_filter.
  - apply subset_filter.
Qed.

Lemma rest_cycle : forall h s, cycle Q h -> fits Q h s -> cycle (rest_of Q s) h.
Proof.
  intros h s ham F. assert (H := ham). destruct H as [L [P [J N]]].
  repeat split; [easy | easy | |].
  - intros u v H. assert (U : used h u v) by now left.
    assert (U' := used_sym Q fine h ham u v U).
    apply (fits_left _ _ _ F), among_spec in U, U'. unfold joined, rest_of. simpl.
    rewrite !filter_In. apply J in H as [H | H]; auto.
  - intros u v H. apply filter_In in H as [_ H]. now apply (fits_chosen _ _ _ F), among_spec.
Qed.

Lemma rest_refuted : forall h s, cycle Q h -> fits Q h s -> refuted (rest_of Q s) -> False.
Proof. intros h s ham F R. apply R. exists h. now apply rest_cycle. Qed.

(** ** Symmetries *)

Lemma image_of_spec : forall s test u v, image_of s test (u, v) = true ->
  exists x y, at_vertex (images s) x = u /\ at_vertex (images s) y = v /\ test x y = true.
Proof.
  intros s test u v H. unfold image_of in H. rewrite !andb_true_iff, !Pos.eqb_eq in H.
  destruct H as [[X Y] T]. eauto.
Qed.

(** What [is_symmetry] makes sure of. *)
Record symmetric (p : vertex -> vertex) : Prop := {
  symmetric_inside : forall v, inside v -> inside (p v);
  symmetric_differ : forall u v, inside u -> inside v -> p u = p v -> u = v;
  symmetric_joined : forall u v, joined Q u v -> joined Q (p u) (p v);
  symmetric_needed : forall u v, In (u, v) (needed Q) ->
    exists x y, (In (x, y) (needed Q) \/ In (y, x) (needed Q)) /\ p x = u /\ p y = v
}.

Lemma is_symmetry_symmetric : forall l, is_symmetry Q (adjacency Q) l = true ->
  symmetric (at_vertex (images (symmetry_of (order Q) l))).
Proof.
  intros l H. unfold is_symmetry in H. set (s := symmetry_of _ l) in *.
  rewrite count_up_all, !andb_true_iff, !forallb_forall in H. destruct H as [[[_ V] E] N].
  assert (V' : forall v, inside v ->
    inside (at_vertex (images s) v) /\ at_vertex (origins s) (at_vertex (images s) v) = v).
  { intros v Hv. apply V in Hv.
    now rewrite andb_true_iff, last_vertex_spec, Pos.eqb_eq in Hv by lia. }
  assert (E' : forall u v, In (u, v) (edges Q) ->
    joined Q (at_vertex (images s) u) (at_vertex (images s) v)).
  { intros u v Huv. apply E, among_spec in Huv. now apply (neighbours_joined Q fine) in Huv. }
  constructor.
  - intros v Hv. now apply V'.
  - intros u v Hu Hv D. apply V' in Hu as [_ Hu], Hv as [_ Hv]. congruence.
  - intros u v [H | H]; [now apply E' | now apply joined_sym, E'].
  - intros u v H. apply N, image_of_spec in H as [x [y [X [Y T]]]]. exists x, y.
    split; [| easy]. apply existsb_exists in T as [[a b] [Hab T]].
    rewrite orb_true_iff, !pair_eqb_spec in T.
    destruct T as [[= <- <-] | [= <- <-]]; auto.
Qed.

(** [closes a]: no Hamiltonian cycle meets the assumptions. *)
Definition closes (a : assumptions) : Prop := forall h, cycle Q h -> ~ meets h a.

(** If a cycle fitted the state, its image would be a cycle that meets what the closed
    node assumes. *)
Lemma is_like_closed : forall h s l a, cycle Q h -> fits Q h s ->
  is_symmetry Q (adjacency Q) l = true ->
  is_like (adjacency Q) s (symmetry_of (order Q) l) a = true -> ~ closes a.
Proof.
  intros h s l a ham F Sym H C. apply is_symmetry_symmetric in Sym.
  unfold is_like in H. set (p := symmetry_of _ l) in *.
  rewrite andb_true_iff, !forallb_forall in H. destruct H as [U R].
  destruct Sym as [In_ Inj J N].
  assert (Image : forall x y, joined Q x y ->
    used (map (at_vertex (images p)) h) (at_vertex (images p) x) (at_vertex (images p) y)
    <-> used h x y).
  { intros x y H. apply joined_vertices in H as [Hx Hy]; [| easy].
    now apply (image_used Q fine h ham). }
  apply (C (map (at_vertex (images p)) h)); [now apply (image_cycle Q fine h ham) |]. split.
  - intros [u v] H. apply U, image_of_spec in H as [x [y [<- [<- T]]]].
    apply among_spec, (fits_chosen _ _ _ F) in T.
    apply Image; [now apply (used_joined Q fine h ham) | easy].
  - intros [u v] H. apply R, image_of_spec in H as [x [y [<- [<- T]]]].
    apply andb_true_iff in T as [T T']. apply among_spec, (neighbours_joined Q fine) in T.
    rewrite (Image x y T). intros H. apply (fits_left _ _ _ F), among_spec in H.
    unfold is_left in T'. now rewrite H in T'.
Qed.

(** ** Nodes *)

Lemma pairs_In : forall l a b, In a l -> In b l -> a <> b ->
  In (a, b) (pairs l) \/ In (b, a) (pairs l).
Proof.
  intros l a b. induction l as [|c l IH]; [easy |]. simpl. rewrite !in_app_iff.
  intros [-> | A] [-> | B] D; [easy | | | destruct (IH A B D); auto].
  - left. left. now apply in_map.
  - right. left. now apply in_map.
Qed.

(** A cycle uses two edges at a vertex, which contain those used there. *)
Lemma pairs_at_meets : forall h s v, cycle Q h -> fits Q h s -> inside v ->
  exists c, In c (pairs_at s v) /\ meets h c.
Proof.
  intros h s v ham F Hv. destruct (degree Q fine h ham v Hv) as [a [b [Ne Deg]]].
  assert (Both : forall c d, In (c, d) (pairs (rev (neighbours (left s) v))) ->
    (c = a /\ d = b) \/ (c = b /\ d = a) -> exists x, In x (pairs_at s v) /\ meets h x).
  { intros c d P E. exists ([(v, c); (v, d)], []). split.
    - apply (in_map (fun ab : vertex * vertex => ([(v, fst ab); (v, snd ab)], [])) _ (c, d)).
      apply filter_In. split; [easy |].
      assert (C := fits_chosen _ _ _ F v).
      destruct (neighbours (chosen s) v) as [|w k]; [easy |].
      assert (U : used h v w) by (apply C; now left). simpl. rewrite orb_true_iff.
      apply Deg in U. unfold among. simpl. rewrite !orb_true_iff, !Pos.eqb_eq.
      intuition congruence.
    - split; [| easy]. intros e [<- | [<- | []]]; apply Deg; simpl; intuition congruence. }
  assert (A : In a (rev (neighbours (left s) v))).
  { apply in_rev. rewrite rev_involutive. apply (fits_left _ _ _ F), Deg. now left. }
  assert (B : In b (rev (neighbours (left s) v))).
  { apply in_rev. rewrite rev_involutive. apply (fits_left _ _ _ F), Deg. now right. }
  destruct (pairs_In _ a b A B Ne) as [P | P]; [apply (Both a b) | apply (Both b a)]; auto.
Qed.

Variable lists : list (list vertex).
Hypothesis symmetries_fine : forallb (is_symmetry Q (adjacency Q)) lists = true.

Notation known := (map (symmetry_of (order Q)) lists).

Definition all_close (m : PositiveMap.t assumptions) : Prop :=
  forall j a, PositiveMap.find j m = Some a -> closes a.

(** A cycle that fits an accepted node meets what one of the children assumes. *)
Lemma children_meet : forall s x m l h,
  children Q (adjacency Q) known s x m = Some l -> all_close m ->
  cycle Q h -> fitting Q h s -> exists c, In c l /\ meets h c.
Proof.
  intros s x m l h H M ham [s' [-> F]].
  assert (Need : forall b k, (if b : bool then Some k else None) = Some l -> b = true /\ k = l).
  { intros [] k E; [now injection E as -> | easy]. }
  unfold children in H. destruct x as [| o | c | u v | v | j k]; [easy | | | | |].
  - apply Need in H as [H _]. elim (rest_refuted h s' ham F).
    apply (check_obstruction_sound _ o); [apply rest_well_formed | easy].
  - apply Need in H as [H _]. elim (rest_refuted h s' ham F).
    apply (check_counting_sound _ c); [apply rest_well_formed | easy].
  - apply Need in H as [_ <-]. destruct (uses h (u, v)) eqn:U.
    + exists ([(u, v)], []). split; [now left |]. split; [| easy].
      intros e [<- | []]. now apply (uses_spec Q fine h ham).
    + exists ([], [(u, v)]). split; [right; now left |]. split; [easy |].
      intros e [<- | []] N. apply (uses_spec Q fine h ham) in N. simpl in N. congruence.
  - apply Need in H as [H <-]. apply andb_true_iff in H as [H _].
    apply last_vertex_spec in H; [| lia]. now apply pairs_at_meets.
  - destruct (PositiveMap.find (Pos.of_succ_nat j) m) as [a |] eqn:J; [| easy].
    destruct (nth_error known k) as [p |] eqn:K; [| easy].
    apply Need in H as [H _]. apply nth_error_In, in_map_iff in K as [q [<- K]].
    rewrite forallb_forall in symmetries_fine. apply symmetries_fine in K.
    elim (is_like_closed h s' q a ham F K H). now apply (M _ a J).
Qed.

(** ** Trees *)

(** Every cycle that meets the assumptions fits the state. *)
Definition covers (a : assumptions) (s : option state) : Prop :=
  forall h, cycle Q h -> meets h a -> fitting Q h s.

Lemma both_meets : forall h a c, meets h a -> meets h c -> meets h (both a c).
Proof.
  intros h a c [A A'] [C C']. unfold both.
  split; simpl; intros e He; apply in_app_or in He as [He | He]; auto.
Qed.

Lemma meets_both : forall h a c, meets h (both a c) -> meets h a /\ meets h c.
Proof.
  intros h a c [U R]. unfold both in *. simpl in *.
  repeat split; intros e He; (apply U || apply R); apply in_or_app; auto.
Qed.

Lemma child_covers : forall a s c, covers a s -> covers (both a c) (child_state Q s c).
Proof.
  intros a s c C h ham M. apply meets_both in M as [A M].
  destruct (C h ham A) as [s' [-> F]]. now apply assume_fits.
Qed.

Lemma forest_close : forall read a, (forall c p p', read c p = Some p' ->
    all_close (closed p) -> all_close (closed p') /\ closes (both a c)) ->
  forall l p p', forest read l p = Some p' -> all_close (closed p) ->
  all_close (closed p') /\ forall c, In c l -> closes (both a c).
Proof.
  intros read a R l. induction l as [|c l IH]; intros p p' H M.
  - injection H as <-. now split.
  - simpl in H. destruct (read c p) as [p1 |] eqn:E; [| easy].
    destruct (R c p p1 E M) as [M1 C]. destruct (IH p1 p' H M1) as [M' C'].
    split; [easy |]. intros d [<- | Hd]; auto.
Qed.

Lemma tree_closes : forall fuel s a p p',
  tree Q (adjacency Q) known fuel s a p = Some p' -> covers a s -> all_close (closed p) ->
  all_close (closed p') /\ closes a.
Proof.
  intros fuel. induction fuel as [|fuel IH]; intros s a p p' H C M; [easy |]. simpl in H.
  destruct (ahead p) as [|x later]; [easy |].
  destruct (children _ _ _ s x (closed p)) as [l |] eqn:L; [| easy].
  destruct (forest _ l _) as [p1 |] eqn:T; [| easy]. injection H as <-. simpl.
  apply forest_close with (a := a) in T; [destruct T as [M1 D] | | easy].
  - assert (A : closes a).
    { intros h ham A. destruct (children_meet s x _ l h L M ham (C h ham A)) as [c [Hc Mc]].
      apply (D c Hc h ham), both_meets; easy. }
    split; [| easy]. intros j b. rewrite PositiveMapAdditionalFacts.gsspec.
    destruct (PositiveMap.E.eq_dec j (number p)); [intros E; now injection E as <- | apply M1].
  - intros c q q' R. apply (IH _ _ _ _ R). now apply child_covers.
Qed.

End Sound.

Theorem check_cases_sound : forall Q c,
  well_formed Q = true -> check_cases Q c = true -> refuted Q.
Proof.
  intros Q c fine H. unfold check_cases in H. rewrite !andb_true_iff in H.
  destruct H as [[L S] T]. apply Nat.leb_le in L.
  destruct (tree _ _ _ _ _ _ _) as [p |] eqn:E; [| easy].
  apply (tree_closes Q fine L _ S) in E as [_ A].
  - intros [h ham]. now apply (A h ham).
  - intros h ham _. now apply start_fits.
  - intros j a. simpl. now rewrite PositiveMap.gempty.
Qed.

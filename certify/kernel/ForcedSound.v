(** * Forced moves are sound

    [fits s]: a Hamiltonian cycle [h] uses all that is chosen in the state [s] and
    nothing that is removed. Each move keeps that true and finds no contradiction. *)

From Coq Require Import Bool List Permutation PArith Arith FMapPositive Lia.
From Certify Require Import Statement Question Edges Facts Sets Obstruction Forced ForcedPaths.
Import ListNotations.

(** ** Lists *)

Lemma not_among : forall v l, among v l = false <-> ~ In v l.
Proof. intros v l. rewrite <- among_spec. destruct (among v l); split; congruence. Qed.

Lemma without_In : forall v w l, In w (without v l) <-> In w l /\ w <> v.
Proof.
  intros v w l. unfold without. rewrite filter_In, negb_true_iff, Pos.eqb_neq.
  split; intros [H D]; split; congruence.
Qed.

Section Sound.

Variable Q : question.
Hypothesis fine : well_formed Q = true.
Variable h : list vertex.
Hypothesis ham : cycle Q h.

Notation inside v := (In v (all_vertices (order Q))).

Record fits (s : state) : Prop := {
  fits_edges : forall u v, In v (neighbours (left s) u) -> joined Q u v;
  fits_left : forall u v, used h u v -> In v (neighbours (left s) u);
  fits_chosen : forall u v, In v (neighbours (chosen s) u) -> used h u v;
  fits_distinct : forall u, NoDup (neighbours (chosen s) u);
  fits_even : forall u v, In v (neighbours (chosen s) u) -> In u (neighbours (chosen s) v);
  fits_paths : exists ps, paths (order Q) (chosen s) (far s) ps;
  fits_waiting : forall v, In v (waiting s) -> inside v
}.

(** The result of a move: no contradiction, and [h] fits. *)
Definition fitting (r : option state) : Prop := exists s, r = Some s /\ fits s.

Lemma fitting_some : forall s, fits s -> fitting (Some s).
Proof. intros s F. now exists s. Qed.

Lemma used_inside : forall u v, used h u v -> inside u /\ inside v.
Proof. intros u v U. now apply joined_vertices, (used_joined Q fine h ham). Qed.

Lemma used_differ : forall u v, used h u v -> u <> v.
Proof. intros u v U. apply (joined_differ Q fine), (used_joined Q fine h ham), U. Qed.

(** No third edge at a vertex. *)
Lemma used_two : forall v a b c,
  used h v a -> used h v b -> a <> b -> used h v c -> c = a \/ c = b.
Proof.
  intros v a b c A B D C.
  destruct (degree Q fine h ham v (proj1 (used_inside v a A))) as [x [y [_ H]]].
  apply H in A, B, C. intuition congruence.
Qed.

(** A vertex with an edge not chosen has fewer than two chosen. *)
Lemma not_full : forall s u v,
  fits s -> used h u v -> ~ In v (neighbours (chosen s) u) ->
  full (neighbours (chosen s) u) = false.
Proof.
  intros s u v F U N. assert (D := fits_distinct s F u). assert (C := fits_chosen s F u).
  destruct (neighbours (chosen s) u) as [|a [|b l]]; [easy | easy | exfalso].
  apply NoDup_cons_iff in D as [D _].
  assert (A : used h u a) by (apply C; now left).
  assert (B : used h u b) by (apply C; right; now left).
  assert (Ne : a <> b) by (intros ->; apply D; now left).
  apply N. destruct (used_two u a b v A B Ne U) as [-> | ->]; [now left | right; now left].
Qed.

Lemma remove_fits : forall u v s, fits s -> ~ used h u v -> fitting (remove u v s).
Proof.
  intros u v s F U. unfold remove, is_left, is_chosen.
  destruct (among v (neighbours (left s) u)) eqn:L; [| now apply fitting_some].
  destruct (among v (neighbours (chosen s) u)) eqn:C.
  { elim U. now apply (fits_chosen s F), among_spec. }
  apply fitting_some. apply among_spec, (fits_edges s F) in L. destruct F as [E K C' D V P W].
  constructor; simpl; auto.
  - intros x y. rewrite !neighbours_add.
    destruct (Pos.eqb_spec x u) as [-> | _]; [intros H; now apply without_In, proj1, E in H |].
    destruct (Pos.eqb_spec x v) as [-> | _]; [| apply E].
    intros H. now apply without_In, proj1, E in H.
  - intros x y H. rewrite !neighbours_add.
    destruct (Pos.eqb_spec x u) as [-> | _].
    { apply without_In. split; [now apply K | now intros ->]. }
    destruct (Pos.eqb_spec x v) as [-> | _]; [| now apply K].
    apply without_In. split; [now apply K |].
    intros ->. now apply U, (used_sym Q fine h ham).
  - apply joined_vertices in L; [| easy].
    intros w [<- | [<- | H]]; [easy | easy | auto].
Qed.

(** Choosing a used edge, once the table of paths is taken care of. *)
Lemma choose_fits : forall u v m s ps, fits s -> used h u v -> ~ In v (neighbours (chosen s) u) ->
  paths (order Q) (chosen (choose u v m s)) m ps -> fits (choose u v m s).
Proof.
  intros u v m s ps F U N P. assert (Ne := used_differ u v U).
  assert (U' := used_sym Q fine h ham u v U).
  assert (In' := used_inside u v U). destruct F as [E K C D V _ W].
  constructor; simpl; eauto.
  - intros x y. rewrite neighbours_pushed. intros [H | [[-> ->] | [_ [-> ->]]]]; auto.
  - intros x. rewrite !neighbours_add.
    destruct (Pos.eqb_spec x u) as [-> | _]; [constructor; auto |].
    destruct (Pos.eqb_spec x v) as [-> | _]; [constructor; auto | auto].
  - intros x y. rewrite !neighbours_pushed. intros [H | [[-> ->] | [H [-> ->]]]]; auto.
  - intros w [<- | [<- | H]]; [easy | easy | auto].
Qed.

(** The steps of a path are used edges, so [h] does not close it early. *)
Lemma not_closing : forall s p ps,
  fits s -> paths (order Q) (chosen s) (far s) (p :: ps) -> head p <> tip p ->
  ~ In (tip p) (neighbours (chosen s) (head p)) -> length p < order Q -> ~ used h (head p) (tip p).
Proof.
  intros s p ps F P Ne N L.
  assert (St : forall u v, In (u, v) (path_steps p) -> In v (neighbours (chosen s) u)).
  { intros u v H. apply (paths_steps _ _ _ _ P p u v); [now left | easy]. }
  assert (D : NoDup p).
  { apply (distinct_front _ (concat ps)). apply (paths_distinct _ _ _ _ P). }
  destruct p as [|a p]; [easy |]. destruct p as [|b p] using rev_ind; [easy |]. clear IHp.
  unfold head in *. simpl hd in *. change (a :: p ++ [b]) with ((a :: p) ++ [b]) in Ne, N |- *.
  rewrite tip_app in *. destruct p as [|c p].
  - elim N. apply St. now left.
  - apply (no_early_closing Q fine h ham a (c :: p) b); [easy | simpl; lia | | easy].
    intros u v H. apply (fits_chosen s F), St, H.
Qed.

Lemma use_fits : forall u v s, fits s -> used h u v ->
  fitting (use (last_vertex Q) u v s).
Proof.
  intros u v s F U. unfold use, is_left, is_chosen, last_vertex.
  destruct (among v (neighbours (chosen s) u)) eqn:C; [now apply fitting_some |].
  apply not_among in C. assert (L := fits_left s F u v U). apply among_spec in L. rewrite L.
  assert (U' := used_sym Q fine h ham u v U).
  assert (C' : ~ In u (neighbours (chosen s) v)) by (intros H; now apply C, (fits_even s F)).
  assert (Fu := not_full s u v F U C). assert (Fv := not_full s v u F U' C'). rewrite Fu, Fv. simpl.
  destruct (used_inside u v U) as [Iu Iv]. assert (Ne := used_differ u v U).
  assert (Some_vertex : order Q <> 0) by (intros O; now rewrite O in Iu).
  destruct (fits_paths s F) as [ps P].
  destruct (paths_first _ _ _ _ u P Iu Fu) as [p [rest [P1 Tu]]].
  assert (Sp : p <> []) by (apply (paths_some _ _ _ _ P1); now left).
  destruct (paths_recorded _ _ _ _ P1 p (or_introl eq_refl)) as [_ Ru]. rewrite Tu in Ru.
  rewrite Ru. assert (Size : length p <> 0) by now destruct p.
  destruct (Pos.eqb_spec (head p) v) as [Hv | Hv].
  - assert (Le : ~ length p < order Q).
    { intros Lt. apply (not_closing s p rest F P1); [congruence | | easy |]; now rewrite Hv, Tu. }
    assert (Lt : (Pos.of_nat (length p) <? Pos.of_nat (order Q))%positive = false).
    { apply Pos.ltb_ge. apply Pos2Nat.inj_le. rewrite !Nat2Pos.id by lia. lia. }
    destruct (far_end (far s) v) as [last after]. rewrite Lt. apply fitting_some.
    apply (choose_fits u v (far s) s (p :: rest)); auto. simpl.
    subst u v. apply (paths_closed _ _ _ _ _ P1). congruence.
  - rewrite <- Tu in Ne.
    destruct (paths_second _ _ _ _ _ v P1 Iv Fv Hv Ne) as [q [others [P2 Hq]]].
    destruct (paths_recorded _ _ _ _ P2 q) as [Rv _]; [right; now left |]. rewrite Hq in Rv.
    rewrite Rv. assert (P3 := paths_joined _ _ _ _ _ _ P2). simpl in P3. rewrite Hq, Tu in P3.
    set (size := (Pos.of_nat (length p) + Pos.of_nat (length q))%positive) in *.
    set (m := PositiveMap.add (head p) _ _) in *. simpl.
    assert (F' : fits (choose u v m s)) by (apply (choose_fits u v m s _ F U C P3)).
    destruct (size <? Pos.of_nat (order Q))%positive eqn:Lt; [| now apply fitting_some].
    simpl. destruct (is_open (choose u v m s) (head p) (tip q)) eqn:O; [| now apply fitting_some].
    apply remove_fits; [easy |].
    assert (Sq : q <> []) by (apply (paths_some _ _ _ _ P2); right; now left).
    assert (Hpq : head (p ++ q) = head p) by now apply head_app.
    assert (Tpq : tip (p ++ q) = tip q) by now apply tip_app_right.
    rewrite <- Hpq, <- Tpq. apply (not_closing _ _ _ F' P3).
    + rewrite Hpq, Tpq. intros H.
      apply (paths_disjoint _ _ _ p q (q :: others) (head p) P2); [now left | now apply head_in |].
      rewrite H. now apply tip_in.
    + rewrite Hpq, Tpq. unfold is_open, is_chosen in O.
      apply andb_true_iff in O as [_ O]. now apply negb_true_iff, not_among in O.
    + rewrite app_length. apply Pos.ltb_lt, Pos2Nat.inj_lt in Lt. unfold size in Lt.
      assert (length q <> 0) by now destruct q.
      rewrite <- Nat2Pos.inj_add, !Nat2Pos.id in Lt; lia.
Qed.

(** ** Many moves *)

Lemma each_fits : forall (A : Type) (move : A -> state -> option state) l s,
  (forall x s, In x l -> fits s -> fitting (move x s)) -> fits s -> fitting (each move l s).
Proof.
  intros A move l. induction l as [|x l IH]; intros s M F; [now apply fitting_some |].
  simpl. destruct (M x s (or_introl eq_refl) F) as [s' [-> F']]. apply IH; [| easy].
  intros y t Hy. apply M. now right.
Qed.

Lemma move_at_fits : forall v s, fits s -> inside v ->
  fitting (move_at (last_vertex Q) v s).
Proof.
  intros v s F Hv. unfold move_at.
  destruct (degree Q fine h ham v Hv) as [x [y [Ne Deg]]].
  assert (Hx : In x (neighbours (left s) v)) by (apply (fits_left s F), Deg; now left).
  assert (Hy : In y (neighbours (left s) v)) by (apply (fits_left s F), Deg; now right).
  destruct (neighbours (left s) v) as [|a [|b [|c l]]].
  - easy.
  - destruct Hx as [-> | []], Hy as [-> | []]. now elim Ne.
  - apply each_fits; [| easy]. intros w t Hw Ft. apply use_fits; [easy |].
    apply Deg. simpl in *. intuition congruence.
  - destruct (full (neighbours (chosen s) v)) eqn:Full; [| now apply fitting_some].
    apply each_fits; [| easy]. intros w t Hw Ft. apply remove_fits; [easy |].
    apply filter_In in Hw as [_ Hw]. apply negb_true_iff, not_among in Hw.
    assert (D := fits_distinct s F v). assert (C := fits_chosen s F v).
    destruct (neighbours (chosen s) v) as [|d [|e k]]; [easy | easy |].
    intros U. apply Hw. apply NoDup_cons_iff in D as [D _].
    assert (Ud : used h v d) by (apply C; now left).
    assert (Ue : used h v e) by (apply C; right; now left).
    assert (De : d <> e) by (intros ->; apply D; now left).
    destruct (used_two v d e w Ud Ue De U) as [-> | ->]; [now left | right; now left].
Qed.

Lemma settle_fits : forall fuel s, fits s -> fitting (settle (last_vertex Q) fuel s).
Proof.
  intros fuel. induction fuel as [|fuel IH]; intros s F; [now apply fitting_some |]. simpl.
  destruct (waiting s) as [|v others] eqn:W; [now apply fitting_some |].
  assert (Wv := fits_waiting s F). rewrite W in Wv.
  set (t := {| left := left s; chosen := chosen s; far := far s; waiting := others |}).
  destruct (move_at_fits v t) as [s' [-> F']]; auto.
  - destruct F. constructor; simpl; auto. intros w Hw. apply Wv. now right.
  - apply Wv. now left.
Qed.

(** [h] uses what is assumed to be used, and nothing that is assumed to be removed. *)
Definition meets (a : assumptions) : Prop :=
  (forall e, In e (fst a) -> used h (fst e) (snd e)) /\
  (forall e, In e (snd a) -> ~ used h (fst e) (snd e)).

Lemma assume_fits : forall fuel a s, fits s -> meets a ->
  fitting (assume (last_vertex Q) fuel a s).
Proof.
  intros fuel a s F [U R]. unfold assume.
  destruct (each_fits _ (fun e => use (last_vertex Q) (fst e) (snd e)) (fst a) s)
    as [s' [-> F']]; [intros; apply use_fits; auto | easy |].
  destruct (each_fits _ (fun e => remove (fst e) (snd e)) (snd a) s')
    as [s'' [-> F'']]; [intros; apply remove_fits; auto | easy |].
  now apply settle_fits.
Qed.

Lemma start_fits : fitting (start Q).
Proof.
  unfold start. apply assume_fits.
  - assert (None_chosen : forall v, neighbours (PositiveMap.empty _) v = []).
    { intros v. unfold neighbours. now rewrite PositiveMap.gempty. }
    constructor; simpl.
    + intros u v H. now apply (neighbours_joined Q fine).
    + intros u v U. apply (neighbours_joined Q fine), (used_joined Q fine h ham), U.
    + intros u v. now rewrite None_chosen.
    + intros u. rewrite None_chosen. constructor.
    + intros u v. now rewrite None_chosen.
    + eexists. apply paths_start, all_vertices_distinct.
    + intros v. now rewrite count_up_all.
  - destruct ham as [_ [_ [_ N]]]. split; [| easy]. intros [u v]. apply N.
Qed.

End Sound.

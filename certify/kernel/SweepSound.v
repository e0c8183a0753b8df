(** * Kind [sweep]: why it refutes

    After every step one of the states is that of the chain of a Hamiltonian cycle, if there
    is one, by induction over the order: none gets lost in the collection, a vertex
    that is reached is named as a piece of its own, and the choices are those of
    SweepFits.v. So at the end there would be a state. *)

From Coq Require Import Bool List Arith PArith FMapPositive Permutation Lia.
From Certify Require Import Statement Steps Question Edges Facts Sweep SweepChain SweepFits.
Import ListNotations.

(** ** The collection *)

Definition held (c : collection) : Prop :=
  forall k l s, PositiveMap.find k (fst c) = Some l -> In s l -> In s (snd c).

Lemma same_equal : forall s t, same s t = true -> s = t.
Proof.
  induction s as [|p s IH]; intros [|q t]; try easy.
  cbn [same]. destruct (pair_eqb p q) eqn:E; [|easy].
  apply pair_eqb_spec in E as ->. intros rest. now rewrite (IH t rest).
Qed.

Lemma collect_sound : forall c s, held c ->
  held (collect c s) /\ incl (s :: snd c) (snd (collect c s)).
Proof.
  intros (m, all) s holds. unfold held, collect in *. cbn [fst snd] in *.
  assert (added : forall bucket, (forall t, In t bucket -> In t all) ->
    forall k l t, PositiveMap.find k (PositiveMap.add (key s) (s :: bucket) m) = Some l ->
      In t l -> In t (s :: all)).
  { intros bucket old k l t. rewrite PositiveMapAdditionalFacts.gsspec.
    destruct PositiveMap.E.eq_dec as [_|_].
    - intros [= <-] [-> | here]; [now left|]. right. now apply old.
    - intros found here. right. now apply (holds k l). }
  destruct (PositiveMap.find (key s) m) as [bucket|] eqn:found.
  - destruct (existsb (same s) bucket) eqn:old.
    + split; [exact holds|]. apply existsb_exists in old as (t & here & E).
      apply same_equal in E as <-. apply incl_cons; [|apply incl_refl].
      now apply (holds (key s) bucket).
    + split; [|apply incl_refl]. apply added. intros t. now apply (holds (key s)).
  - split; [|apply incl_refl]. now apply added.
Qed.

Lemma collect_list : forall l c, held c ->
  held (fold_left collect l c) /\ incl (l ++ snd c) (snd (fold_left collect l c)).
Proof.
  induction l as [|s l IH]; intros c holds; [split; [exact holds | apply incl_refl]|].
  destruct (collect_sound c s holds) as [holds' more].
  destruct (IH _ holds') as [holds'' rest]. split; [exact holds''|].
  intros t here. apply rest. apply in_or_app.
  destruct here as [-> | here]; [right; apply more; now left|].
  apply in_app_or in here as [here | here]; [now left|]. right. apply more. now right.
Qed.

Lemma collect_all : forall (f : state -> list state) ss s t,
  In s ss -> In t (f s) ->
  In t (snd (fold_left (fun c s => fold_left collect (f s) c) ss (PositiveMap.empty _, []))).
Proof.
  intros f ss s t here t_here.
  assert (flat : forall c, fold_left (fun c s => fold_left collect (f s) c) ss c
                           = fold_left collect (flat_map f ss) c).
  { clear. induction ss as [|s ss IH]; intros c; [reflexivity|].
    cbn [fold_left flat_map]. now rewrite fold_left_app. }
  rewrite flat. apply collect_list.
  - intros k l r. cbn [fst]. now rewrite PositiveMap.gempty.
  - apply in_or_app. left. apply in_flat_map. now exists s.
Qed.

(** ** The steps *)

Section Steps.

Variable Q : question.
Hypothesis fine : well_formed Q = true.

Definition coming (m : PositiveMap.t bool) (e : vertex * vertex) : Prop :=
  ordered e = e /\ joined Q (fst e) (snd e) /\ swept m (fst e) = false /\ swept m (snd e) = false.

Definition apart (m : PositiveMap.t bool) : list vertex :=
  filter (fun u => negb (reached m u)) (all_vertices (order Q)).

(** One of the states is that of a chain made of a Hamiltonian cycle. *)
Definition followed (p : progress) : Prop :=
  unreached p = length (apart (marks p)) /\
  exists s c, In s (states p) /\ fits Q (coming (marks p)) (apart (marks p)) s c.

Lemma find_after : forall m v ahead x,
  PositiveMap.find x (marks_after m v ahead) =
  if (x =? v)%positive then Some true
  else if existsb (Pos.eqb x) ahead then Some false else PositiveMap.find x m.
Proof.
  intros m v ahead x. unfold marks_after.
  destruct (Pos.eqb_spec x v) as [-> | differ]; [apply PositiveMap.gss|].
  rewrite PositiveMap.gso by exact differ.
  induction ahead as [|u ahead IH]; [reflexivity|].
  cbn [fold_right existsb]. destruct (Pos.eqb_spec x u) as [-> | other].
  - apply PositiveMap.gss.
  - now rewrite PositiveMap.gso.
Qed.

Lemma swept_after : forall m v ahead x, (forall u, In u ahead -> swept m u = false) ->
  swept (marks_after m v ahead) x = ((x =? v)%positive || swept m x).
Proof.
  intros m v ahead x new. unfold swept. rewrite find_after.
  destruct (x =? v)%positive; [reflexivity|].
  destruct (existsb (Pos.eqb x) ahead) eqn:E; [|reflexivity].
  apply existsb_exists in E as (u & here & same). apply Pos.eqb_eq in same as ->.
  symmetry. now apply new.
Qed.

Lemma reached_after : forall m v ahead x,
  reached (marks_after m v ahead) x = true <-> In x (v :: ahead) \/ reached m x = true.
Proof.
  intros m v ahead x. unfold reached. rewrite find_after. cbn [In].
  destruct (Pos.eqb_spec x v) as [-> | differ]; [intuition congruence|].
  destruct (existsb (Pos.eqb x) ahead) eqn:E.
  - apply existsb_exists in E as (u & here & same). apply Pos.eqb_eq in same as ->. tauto.
  - split; [tauto|]. intros [[-> | here] | old]; [easy | | exact old].
    rewrite (proj2 (existsb_exists _ _)) in E; [easy|].
    exists x. split; [exact here | apply Pos.eqb_refl].
Qed.

Lemma apart_after : forall m v ahead,
  NoDup (v :: ahead) -> incl (v :: ahead) (all_vertices (order Q)) ->
  Permutation (apart m)
    (filter (fun u => negb (reached m u)) (v :: ahead) ++ apart (marks_after m v ahead)).
Proof.
  intros m v ahead distinct vertices.
  apply NoDup_Permutation.
  - apply NoDup_filter, all_vertices_distinct.
  - apply distinct_app; [now apply NoDup_filter | apply NoDup_filter, all_vertices_distinct|].
    intros x here there. apply filter_In in here as [here _]. apply filter_In in there as [_ there].
    rewrite (proj2 (reached_after m v ahead x)) in there; [easy | now left].
  - intros x. unfold apart. rewrite in_app_iff, !filter_In, !negb_true_iff.
    rewrite <- !not_true_iff_false, reached_after.
    split; [|intuition].
    intros [here new]. destruct (in_dec Pos.eq_dec x (v :: ahead)); tauto.
Qed.

Lemma sweep_vertex_sound : forall p v,
  swept (marks p) v = false -> In v (all_vertices (order Q)) ->
  followed p -> followed (sweep_vertex Q (adjacency Q) p v).
Proof.
  intros [m k ss] v v_new v_vertex [counted (s & c & here & fit)].
  cbn [marks unreached states] in *.
  set (ahead := filter (fun u => negb (swept m u)) (neighbours (adjacency Q) v)).
  set (fresh := filter (fun u => negb (reached m u)) (v :: ahead)).
  set (us := map (fun u => (u, is_needed Q v u)) ahead).
  assert (ahead_spec : forall u, In u ahead <-> joined Q v u /\ swept m u = false).
  { intros u. unfold ahead. now rewrite filter_In, neighbours_joined, negb_true_iff. }
  assert (us_fst : map fst us = ahead).
  { unfold us. rewrite map_map. apply map_id. }
  assert (ahead_distinct : NoDup ahead) by now apply NoDup_filter, neighbours_distinct.
  set (m' := marks_after m v ahead).
  assert (parts : Permutation (apart m) (fresh ++ apart m')).
  { apply apart_after.
    - constructor; [|exact ahead_distinct]. intros again. apply ahead_spec in again as [again _].
      now apply (joined_differ Q fine) in again.
    - intros u [<- | u_ahead]; [exact v_vertex|].
      apply ahead_spec in u_ahead as [edge _]. now apply (joined_vertices Q fine) in edge. }
  assert (k_after : k - length fresh = length (apart m')).
  { rewrite counted, parts, app_length. lia. }
  assert (not_apart : forall u, In u (v :: ahead) -> ~ In u (apart m')).
  { intros u known. unfold apart. rewrite filter_In, negb_true_iff.
    intros [_ new]. assert (old := proj2 (reached_after m v ahead u) (or_introl known)).
    fold m' in old. congruence. }
  assert (set_ : ready Q (coming m) (apart m') v us).
  { split.
    - now rewrite us_fst.
    - intros u must listed. apply (in_map fst) in listed.
      rewrite us_fst in listed. cbn [fst] in listed.
      split; [|apply not_apart; now right].
      apply ahead_spec in listed as [edge u_new]. unfold coming. rewrite ordered_again.
      apply joined_sym in edge as edge'. now destruct (ordered_ends v u) as [-> | ->].
    - intros u listed. apply in_map_iff in listed as (w & [= -> need] & _).
      apply existsb_exists in need as (e & e_needed & same). now apply pair_eqb_spec in same as ->.
    - intros (x, y) (in_order & edge & x_new & y_new) at_v. cbn [fst snd] in *.
      rewrite us_fst, <- in_order. apply touches_spec in at_v as [<- | <-].
      + exists y. now rewrite ahead_spec.
      + exists x. rewrite ahead_spec, ordered_swap. now apply joined_sym in edge. }
  split; [exact k_after|].
  destruct (advance_sound Q v (k - length fresh =? 0) (apart m')) with (come := coming m)
    (fresh := fresh) (us := us) (s := s) (c := c) as (s' & c' & s'_here & fit'); try easy.
  - intros none. now rewrite k_after, none.
  - apply not_apart. now left.
  - revert fit. apply fits_renamed, Permutation_app_head. now apply Permutation_map.
  - exists s', c'. split; [now apply (collect_all _ ss s)|].
    revert fit'. apply fits_same. intros (x, y). unfold off, coming.
    change (marks (sweep_vertex Q (adjacency Q) {| marks := m; unreached := k; states := ss |} v))
      with (marks_after m v ahead).
    cbn [fst snd]. rewrite !swept_after by (intros u here'; now apply ahead_spec).
    unfold touches. cbn [fst snd]. rewrite !orb_false_iff. tauto.
Qed.

Lemma sweep_sound : 0 < order Q -> forall l p, followed p ->
  sweep Q (adjacency Q) (Pos.of_nat (order Q)) l p = false.
Proof.
  intros some l. induction l as [|v l IH]; intros p follows; cbn [sweep].
  - destruct follows as (_ & s & _ & here & _). now destruct (states p).
  - destruct (swept (marks p) v) eqn:new; [reflexivity|].
    destruct (Pos.leb_spec v (Pos.of_nat (order Q))) as [small | _]; [|reflexivity].
    apply IH, sweep_vertex_sound; [exact new | | exact follows].
    apply vertex_at_most. lia.
Qed.

(** At the beginning every vertex of the cycle is a piece. *)
Lemma beginning_followed : forall h, cycle Q h -> followed (beginning Q).
Proof.
  intros h ham.
  assert (unmarked : apart (PositiveMap.empty _) = all_vertices (order Q)).
  { unfold apart, reached.
    rewrite (filter_ext _ (fun _ => true)) by (intros u; now rewrite PositiveMap.gempty).
    induction (all_vertices (order Q)); cbn; congruence. }
  assert (links_h : links (map alone h) = map ordered (cycle_steps h)).
  { unfold links. rewrite cycle_steps_map, map_map. apply map_ext. now intros []. }
  split; cbn [marks unreached states beginning].
  - now rewrite unmarked, all_vertices_length.
  - exists [], (map alone h). split; [now left|]. rewrite unmarked. split.
    + rewrite map_ordered_alone. apply Permutation_map. now destruct ham as (_ & all & _).
    + rewrite map_ordered_alone. intros x. rewrite count_map.
      change 1 with (length [x]). apply NoDup_incl_length.
      * apply NoDup_filter, (cycle_distinct Q fine h ham).
      * intros u here. apply filter_In in here as [_ at_x].
        apply touches_spec in at_x. left. tauto.
    + rewrite links_h. apply (Permutation_NoDup (used_edges Q fine h ham)).
      apply NoDup_filter, edges_distinct, fine.
    + intros (u, v) here. rewrite links_h, <- (used_edges Q fine h ham) in here.
      apply filter_In in here as [here _].
      destruct (well_formed_spec Q fine) as (up & _).
      unfold coming. cbn [fst snd]. unfold swept. rewrite !PositiveMap.gempty.
      apply up in here as less. split; [|split; [now left | easy]].
      destruct (ordered_cases u v) as [[_ E] | [] ]; [exact E | lia].
    + intros (u, v) need _. rewrite links_h, <- (used_edges Q fine h ham).
      apply filter_In. split; [now apply (needed_edges Q fine)|].
      apply (uses_spec Q fine h ham). destruct ham as (_ & _ & _ & must). now apply must.
Qed.

End Steps.

Theorem check_sweep_sound : forall Q l,
  well_formed Q = true -> check_sweep Q l = true -> refuted Q.
Proof.
  intros Q l fine checked (h & ham). unfold check_sweep in checked.
  destruct (_ && _) eqn:sizes in checked; [|discriminate].
  apply andb_true_iff in sizes as [large _]. apply Nat.leb_le in large.
  rewrite (sweep_sound Q fine) in checked; [easy | lia |].
  now apply beginning_followed with h.
Qed.

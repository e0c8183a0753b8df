(** * What holds for every Hamiltonian cycle

    Degree, cut, no shorter cycle, symmetry: the lemmas from which each kind of
    evidence follows. *)

From Coq Require Import Bool List Permutation PArith Arith FMapPositive Lia.
From Certify Require Import Statement Steps Question Edges.
Import ListNotations.

(** [uses h e]: [used], computed. *)
Definition uses (h : list vertex) (e : vertex * vertex) : bool :=
  existsb (fun f => pair_eqb e f || pair_eqb (snd e, fst e) f) (cycle_steps h).

Definition count {A : Type} (p : A -> bool) (l : list A) : nat := length (filter p l).

Lemma count_same : forall (A : Type) (p : A -> bool) l m,
  Permutation l m -> count p l = count p m.
Proof.
  intros A p l m same. unfold count.
  induction same as [| a l m _ IH | a b l | l m k _ IH _ IH']; cbn [filter];
    [easy | | | congruence].
  - destruct (p a); cbn [length]; congruence.
  - now destruct (p a), (p b).
Qed.

Lemma count_map : forall (A B : Type) (f : A -> B) (p : B -> bool) l,
  count p (map f l) = count (fun a => p (f a)) l.
Proof.
  intros A B f p l. unfold count. induction l as [| a l IH]; [easy |].
  cbn [map filter]. destruct (p (f a)); cbn [length]; congruence.
Qed.

Lemma count_both : forall (A : Type) (p q : A -> bool) l,
  count (fun a => p a && q a) l = count p (filter q l).
Proof.
  intros A p q l. unfold count. induction l as [| a l IH]; [easy |].
  cbn [filter]. destruct (q a), (p a) eqn:is_p; cbn [andb filter]; rewrite ?is_p;
    cbn [length]; congruence.
Qed.

Lemma count_or : forall (A : Type) (p q : A -> bool) l,
  (forall a, In a l -> p a = true -> q a = true -> False) ->
  count (fun a => p a || q a) l = count p l + count q l.
Proof.
  intros A p q l never. unfold count. induction l as [| a l IH]; [easy |].
  cbn [filter]. specialize (never a (or_introl eq_refl)) as never_a.
  assert (forall b, In b l -> p b = true -> q b = true -> False) as later
    by (intros b listed; apply never; now right).
  specialize (IH later).
  destruct (p a), (q a); cbn [orb length]; [exfalso; now apply never_a | lia | lia | lia].
Qed.

Lemma count_one : forall l (v : vertex),
  NoDup l -> In v l -> count (fun u => u =? v)%positive l = 1.
Proof.
  intros l v distinct listed. unfold count.
  induction distinct as [| u l fresh _ IH]; [easy |]. cbn [filter].
  destruct (Pos.eqb_spec u v) as [-> | differ].
  - cbn [length]. f_equal.
    destruct (filter (fun u => u =? v)%positive l) as [| w k] eqn:more; [easy |]. exfalso.
    assert (In w (filter (fun u => u =? v)%positive l)) as again by (rewrite more; now left).
    apply filter_In in again as [again same]. apply Pos.eqb_eq in same. now subst.
  - destruct listed as [-> | listed]; [easy | now apply IH].
Qed.

Definition touches (v : vertex) (e : vertex * vertex) : bool :=
  (fst e =? v)%positive || (snd e =? v)%positive.

Definition leaves (s : vertex -> bool) (e : vertex * vertex) : bool :=
  xorb (s (fst e)) (s (snd e)).

Lemma touches_sym : forall v x y, touches v (x, y) = touches v (y, x).
Proof. intros v x y. apply orb_comm. Qed.

(** Every lemma takes the same hypotheses in the same order, also the few that could do
    with less. *)
Set Default Proof Using "All".

Section Facts.

Variable Q : question.
Hypothesis fine : well_formed Q = true.

Lemma joined_sym : forall u v, joined Q u v -> joined Q v u.
Proof using Q. unfold joined; tauto. Qed.

Lemma neighbours_joined : forall u v,
  In v (neighbours (adjacency Q) u) <-> joined Q u v.
Proof.
  intros u v. destruct (well_formed_spec Q fine) as (up & _).
  pose proof (neighbours_list Q u up) as same. unfold joined.
  rewrite <- (other_in u v _ up).
  split; apply Permutation_in; [exact same | exact (Permutation_sym same)].
Qed.

Lemma neighbours_distinct : forall u, NoDup (neighbours (adjacency Q) u).
Proof.
  intros u. destruct (well_formed_spec Q fine) as (up & distinct & _).
  apply (Permutation_NoDup (Permutation_sym (neighbours_list Q u up))).
  now apply other_distinct.
Qed.

Lemma edges_distinct : NoDup (edges Q).
Proof. now destruct (well_formed_spec Q fine). Qed.

Lemma joined_differ : forall u v, joined Q u v -> u <> v.
Proof.
  intros u v [listed | listed] <-; destruct (well_formed_spec Q fine) as (up & _);
    apply up in listed; lia.
Qed.

Lemma joined_vertices : forall u v,
  joined Q u v -> In u (all_vertices (order Q)) /\ In v (all_vertices (order Q)).
Proof.
  destruct (well_formed_spec Q fine) as (up & _ & _ & _ & range).
  intros u v [listed | listed]; rewrite !vertex_at_most;
    apply range in listed as last; apply up in listed; lia.
Qed.

Lemma needed_edges : forall e, In e (needed Q) -> In e (edges Q).
Proof. now destruct (well_formed_spec Q fine) as (_ & _ & _ & part & _). Qed.

Variable h : list vertex.
Hypothesis ham : cycle Q h.

Lemma uses_spec : forall u v, uses h (u, v) = true <-> used h u v.
Proof.
  intros u v. unfold uses, used. rewrite existsb_exists. cbn [fst snd]. split.
  - intros (f & step & same). rewrite orb_true_iff, !pair_eqb_spec in same.
    destruct same as [-> | ->]; tauto.
  - intros [step | step]; [exists (u, v) | exists (v, u)];
      rewrite orb_true_iff, !pair_eqb_spec; tauto.
Qed.

Lemma uses_sym : forall u v, uses h (u, v) = uses h (v, u).
Proof.
  intros u v. apply eq_true_iff_eq. rewrite !uses_spec. unfold used. tauto.
Qed.

Lemma cycle_distinct : NoDup h.
Proof.
  destruct ham as (_ & all & _).
  apply (Permutation_NoDup (Permutation_sym all)), all_vertices_distinct.
Qed.

Lemma cycle_visits : forall v, In v h <-> In v (all_vertices (order Q)).
Proof.
  intros v. destruct ham as (_ & all & _).
  split; apply Permutation_in; [exact all | exact (Permutation_sym all)].
Qed.

Lemma used_joined : forall u v, used h u v -> joined Q u v.
Proof.
  destruct ham as (_ & _ & along & _).
  intros u v [step | step]; apply along in step; [easy | now apply joined_sym].
Qed.

Lemma used_sym : forall u v, used h u v -> used h v u.
Proof. unfold used. tauto. Qed.

(** The used edges are the steps, each once. *)
Lemma used_edges : Permutation (filter (uses h) (edges Q)) (map ordered (cycle_steps h)).
Proof.
  destruct (well_formed_spec Q fine) as (up & distinct & _).
  destruct ham as (long & _ & along & _).
  assert (there : forall u v, In (u, v) (cycle_steps h) -> u <> v)
    by (intros u v step; apply joined_differ, along, step).
  apply NoDup_Permutation.
  - now apply NoDup_filter.
  - apply distinct_map; [| apply cycle_steps_distinct, cycle_distinct].
    intros [u v] [x y] step other same.
    apply ordered_same in same as [same | [= -> ->]]; [exact same |].
    now destruct (one_way h y x cycle_distinct long step).
  - intros [u v]. rewrite filter_In, uses_spec, in_map_iff. split.
    + intros [listed use]. apply up in listed.
      destruct use as [step | step]; [exists (u, v) | exists (v, u)]; (split; [| exact step]);
        [destruct (ordered_cases u v) | destruct (ordered_cases v u)]; intuition lia.
    + intros ([x y] & is & step). split.
      * rewrite <- is. apply ordered_listed; [exact up | now apply there | now apply along].
      * unfold used. destruct (ordered_cases x y) as [[_ E] | [_ E]];
          rewrite E in is; injection is as <- <-; tauto.
Qed.

(** What does not depend on direction may be counted along the cycle. *)
Lemma count_used : forall p : vertex * vertex -> bool,
  (forall u v, p (u, v) = p (v, u)) ->
  count (fun e => p e && uses h e) (edges Q) = count p (cycle_steps h).
Proof.
  intros p sym. rewrite count_both, (count_same _ _ _ _ used_edges), count_map.
  unfold count. f_equal. apply filter_ext. intros [u v].
  destruct (ordered_cases u v) as [[_ ->] | [_ ->]]; auto.
Qed.

(** The two neighbours of a vertex along the cycle. *)
Lemma degree : forall v, In v (all_vertices (order Q)) ->
  exists a b, a <> b /\ forall c, used h v c <-> c = a \/ c = b.
Proof.
  intros v visited. apply cycle_visits in visited.
  destruct ham as (long & _).
  destruct (turn h v cycle_distinct long visited) as (a & b & _ & _ & differ & next & before).
  exists a, b. split; [exact differ |]. intros c. unfold used. now rewrite next, before.
Qed.

(** The same, counted along the edges of the question, and along the neighbours. *)
Lemma degree_count : forall v, In v (all_vertices (order Q)) ->
  count (fun e => touches v e && uses h e) (edges Q) = 2.
Proof.
  intros v visited. apply cycle_visits in visited.
  rewrite count_used by (intros; apply touches_sym).
  rewrite (count_or _ (fun e => fst e =? v)%positive (fun e => snd e =? v)%positive).
  - rewrite <- (count_map _ _ fst (fun u => u =? v)%positive), cycle_steps_fst.
    rewrite <- (count_map _ _ snd (fun u => u =? v)%positive).
    rewrite (count_same _ _ _ _ (cycle_steps_snd h)).
    rewrite !count_one by (try apply cycle_distinct; exact visited). reflexivity.
  - intros [x y] step. cbn [fst snd]. rewrite !Pos.eqb_eq. intros -> ->.
    apply (joined_differ v v); [| reflexivity]. apply used_joined. now left.
Qed.

Lemma degree_neighbours : forall v, In v (all_vertices (order Q)) ->
  count (fun u => uses h (v, u)) (neighbours (adjacency Q) v) = 2.
Proof.
  intros v visited. rewrite <- (degree_count v visited).
  destruct (well_formed_spec Q fine) as (up & _).
  rewrite (count_same _ _ _ _ (neighbours_list Q v up)).
  induction (edges Q) as [| [x y] l IH]; [reflexivity |].
  cbn [flat_map]. unfold count in *. rewrite filter_app, app_length, IH.
  - unfold other, touches. cbn [filter fst snd].
    destruct (Pos.eqb_spec x v) as [<- | _]; [| destruct (Pos.eqb_spec y v) as [<- | _]];
      cbn [orb andb filter]; [| rewrite (uses_sym y x) |];
      try destruct (uses h (x, y)); reflexivity.
  - intros ? ? ?. apply up. now right.
Qed.

(** The cycle leaves every set of some, not all vertices, and an even number of times. *)
Lemma cut_count : forall s u v,
  In u (all_vertices (order Q)) -> In v (all_vertices (order Q)) ->
  s u = true -> s v = false ->
  2 <= count (fun e => leaves s e && uses h e) (edges Q).
Proof.
  intros s u v u_in v_in inside outside.
  rewrite count_used by (intros x y; apply xorb_comm).
  destruct (cycle_parity s h : Nat.Even (count (leaves s) (cycle_steps h))) as [k even].
  enough (0 < count (leaves s) (cycle_steps h)) by lia. clear k even.
  rewrite <- cycle_visits in u_in, v_in.
  destruct (cycle_crosses s h u v u_in v_in inside outside) as (a & b & a_side & b_side & step).
  assert (In (a, b) (filter (leaves s) (cycle_steps h))) as found.
  { apply filter_In. unfold leaves. cbn [fst snd]. now rewrite a_side, b_side. }
  unfold count. destruct (filter (leaves s) (cycle_steps h)); [easy | cbn; lia].
Qed.

Lemma cut_even : forall s,
  Nat.Even (count (fun e => leaves s e && uses h e) (edges Q)).
Proof.
  intros s. rewrite count_used by (intros u v; apply xorb_comm). apply cycle_parity.
Qed.

Lemma cut_leaves : forall s u v,
  In u (all_vertices (order Q)) -> In v (all_vertices (order Q)) ->
  s u = true -> s v = false ->
  exists a b, s a = true /\ s b = false /\ used h a b.
Proof.
  intros s u v u_in v_in inside outside. rewrite <- cycle_visits in u_in, v_in.
  destruct (cycle_crosses s h u v u_in v_in inside outside) as (a & b & ? & ? & step).
  exists a, b. unfold used. tauto.
Qed.

(** It has as many edges as vertices. *)
Lemma total_count : count (uses h) (edges Q) = order Q.
Proof.
  unfold count. rewrite (Permutation_length used_edges), map_length, cycle_steps_length.
  destruct ham as (_ & all & _). now rewrite (Permutation_length all), all_vertices_length.
Qed.

(** No shorter cycle: used edges that close a cycle visit everything. *)
Lemma no_shorter_cycle : forall c,
  NoDup c -> 3 <= length c ->
  (forall u v, In (u, v) (cycle_steps c) -> used h u v) ->
  length c = order Q.
Proof.
  intros c distinct long all_used. destruct ham as (h_long & all & _).
  rewrite <- (all_vertices_length (order Q)), <- (Permutation_length all).
  assert (inside : incl c h).
  { intros v listed. destruct (turn c v distinct long listed) as (a & _ & _ & _ & _ & next & _).
    destruct (all_used v a) as [step | step]; [now apply next | |];
      now apply cycle_steps_in in step. }
  apply Nat.le_antisymm; [now apply NoDup_incl_length |].
  apply NoDup_incl_length; [exact cycle_distinct |].
  intros v visited.
  destruct (in_dec Pos.eq_dec v c) as [listed | missed]; [easy |]. exfalso.
  (* The cycle leaves [c] at some vertex [a], where it would then use three edges. *)
  pose (s := fun w => if in_dec Pos.eq_dec w c then true else false).
  destruct c as [| x c]; [cbn in long; lia |].
  destruct (cut_leaves s x v) as (a & b & a_side & b_side & out); unfold s in *.
  - apply cycle_visits, inside. now left.
  - now apply cycle_visits.
  - destruct in_dec as [_ | no]; [easy |]. exfalso. apply no. now left.
  - now destruct in_dec.
  - destruct (in_dec Pos.eq_dec a (x :: c)) as [a_in | _]; [| easy].
    destruct (in_dec Pos.eq_dec b (x :: c)) as [_ | b_out]; [easy |].
    destruct (turn _ a distinct long a_in) as (p & q & p_in & q_in & differ & next & before).
    destruct (degree a) as (y & z & _ & only); [now apply cycle_visits, inside |].
    assert (used h a p) as first by now apply all_used, next.
    assert (used h a q) as second by now apply used_sym, all_used, before.
    apply only in first, second, out.
    destruct first as [-> | ->], second as [-> | ->], out as [-> | ->]; tauto.
Qed.

(** A path of used edges that does not visit everything is not closed by one more. *)
Lemma no_early_closing : forall a c b,
  NoDup (a :: c ++ [b]) -> 1 <= length c ->
  (forall u v, In (u, v) (path_steps (a :: c ++ [b])) -> used h u v) ->
  length (a :: c ++ [b]) < order Q ->
  ~ used h a b.
Proof.
  intros a c b distinct inner all_used short closing.
  enough (length (a :: c ++ [b]) = order Q) by lia.
  apply no_shorter_cycle; [exact distinct | cbn; rewrite app_length; cbn; lia |].
  intros u v step.
  replace (cycle_steps (a :: c ++ [b])) with (path_steps (a :: c ++ [b]) ++ [(b, a)]) in step.
  - apply in_app_or in step. destruct step as [step | [[= <- <-] | []]]; [now apply all_used |].
    now apply used_sym.
  - cbn [cycle_steps]. cbn [app]. rewrite <- app_assoc.
    symmetry. apply (path_steps_app (a :: c) b [a]).
Qed.

(** An automorphism takes the cycle to a cycle. *)
Lemma image_cycle : forall p : vertex -> vertex,
  (forall v, In v (all_vertices (order Q)) -> In (p v) (all_vertices (order Q))) ->
  (forall u v, In u (all_vertices (order Q)) -> In v (all_vertices (order Q)) ->
     p u = p v -> u = v) ->
  (forall u v, joined Q u v -> joined Q (p u) (p v)) ->
  (forall u v, In (u, v) (needed Q) ->
     exists x y, (In (x, y) (needed Q) \/ In (y, x) (needed Q)) /\ p x = u /\ p y = v) ->
  cycle Q (map p h).
Proof.
  intros p stays one along carried. destruct ham as (long & all & steps & must).
  assert (visits : forall v, In v h <-> In v (all_vertices (order Q))) by exact cycle_visits.
  unfold cycle. rewrite map_length, cycle_steps_map. repeat split.
  - exact long.
  - apply NoDup_Permutation_bis.
    + apply distinct_map; [| exact cycle_distinct]. intros u v. rewrite !visits. apply one.
    + rewrite map_length, (Permutation_length all). lia.
    + intros v. rewrite in_map_iff. intros (u & <- & visited). now apply stays, visits.
  - intros u v. rewrite in_map_iff. intros ([x y] & [= <- <-] & step). now apply along, steps.
  - intros u v listed. apply carried in listed. destruct listed as (x & y & listed & <- & <-).
    unfold used. rewrite cycle_steps_map, !in_map_iff.
    assert (In (x, y) (cycle_steps h) \/ In (y, x) (cycle_steps h)) as way
      by (destruct listed as [listed | listed]; apply must in listed; unfold used in listed; tauto).
    destruct way as [step | step]; [left | right]; eexists; (split; [| exact step]); reflexivity.
Qed.

Lemma image_used : forall (p : vertex -> vertex) u v,
  (forall x y, In x (all_vertices (order Q)) -> In y (all_vertices (order Q)) ->
     p x = p y -> x = y) ->
  In u (all_vertices (order Q)) -> In v (all_vertices (order Q)) ->
  used (map p h) (p u) (p v) <-> used h u v.
Proof.
  intros p u v one u_in v_in. unfold used. rewrite cycle_steps_map, !in_map_iff.
  assert (back : forall x y, In (x, y) (cycle_steps h) ->
            In x (all_vertices (order Q)) /\ In y (all_vertices (order Q))).
  { intros x y step. apply cycle_steps_in in step. now rewrite !cycle_visits in step. }
  split.
  - intros [([x y] & [= E F] & step) | ([x y] & [= E F] & step)];
      destruct (back x y step); apply one in E, F; try easy; subst; tauto.
  - intros [step | step]; [left | right]; eexists; (split; [| exact step]); reflexivity.
Qed.

End Facts.

(** The edge joined to itself, the empty cut and the like never arise: [cycle] needs three
    vertices. *)
Lemma small_refuted : forall Q, order Q < 3 -> refuted Q.
Proof.
  intros Q small (h & long & all & _). apply Permutation_length in all.
  rewrite all_vertices_length in all. lia.
Qed.

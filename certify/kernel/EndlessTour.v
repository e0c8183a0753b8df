(** * Endless claims: the answer is right

    A tour of a graph is a chain of single vertices at the beginning. The plan finds the
    empty state at the end exactly if there is one. *)

From Coq Require Import Bool List Arith PArith Permutation Lia.
From Certify Require Import Statement Steps Question Normal Edges Facts Sweep SweepChain SweepFits
  EndlessRename EndlessJoin EndlessPlan EndlessNames EndlessSteps.
Import ListNotations.

Section Tour.

Context {A : Type}.
Variable meet : A -> A -> bool.

Definition tour (all h : list A) : Prop :=
  3 <= length h /\ Permutation h all /\
  forall u v, In (u, v) (cycle_steps h) -> meet u v = true.

Variables (fixed body : list A) (width : nat).
Hypothesis meet_sym : forall a b, In a (fixed ++ body) -> In b (fixed ++ body) ->
  meet a b = meet b a.

Let k := length fixed.
Let first := first_name fixed.
Let all := number 1%positive (fixed ++ body).
Let coming := coming_names meet fixed body.
Let apart := nameless fixed body width.
Let rename_at i := rename (shift fixed i).

Lemma all_at : forall p a, In (p, a) all <-> at_name fixed body p = Some a.
Proof.
  intros p a. unfold all, at_name. rewrite in_number. change (Pos.to_nat 1) with 1.
  split; [tauto |]. intros E. split; [lia | exact E].
Qed.

Lemma shift_none : forall s, rename_at 0 s = s.
Proof.
  intros s. unfold rename_at, rename. rewrite (map_ext _ (fun e => e)); [apply map_id |].
  intros [x y]. unfold rename_pair, shift. cbn [fst snd].
  f_equal; destruct (_ <? _)%positive; lia.
Qed.

Lemma start_names : Permutation
  (map ordered (rename_at 0 (start fixed width body)) ++ map alone (apart 0))
  (map alone (map fst all)).
Proof.
  rewrite shift_none. unfold start, apart, nameless, all.
  rewrite <- (map_map fst alone), map_ordered_alone, !number_names, <- map_app.
  rewrite <- map_app. change (Pos.to_nat 1) with 1.
  replace (seq 1 (length (fixed ++ body))) with
    (seq 1 (length (fixed ++ firstn width body))
     ++ seq (length fixed + 0 + width + 1) (length body - 0 - width)); [reflexivity |].
  rewrite !app_length, firstn_length.
  destruct (Nat.le_gt_cases width (length body)) as [more | less].
  - rewrite Nat.min_l by exact more.
    replace (length fixed + length body)
      with ((length fixed + width) + (length body - 0 - width)) by lia.
    rewrite (seq_app (length fixed + width)). f_equal. f_equal; lia.
  - rewrite Nat.min_r by lia. replace (length body - 0 - width) with 0 by lia.
    cbn [seq]. now rewrite app_nil_r.
Qed.

Lemma links_alone : forall g, links (map alone g) = map ordered (cycle_steps g).
Proof.
  intros g. unfold links. rewrite cycle_steps_map, map_map. apply map_ext. now intros [].
Qed.

(** ** From a tour to the beginning, and back *)

Lemma tour_starts : forall h, tour (fixed ++ body) h ->
  exists c, fits nothing (coming 0) (apart 0) (rename_at 0 (start fixed width body)) c.
Proof.
  intros h (long & visits_all & along).
  assert (snd_all : map snd all = fixed ++ body) by apply number_items.
  rewrite <- snd_all in visits_all.
  apply Permutation_map_inv in visits_all as (p & -> & same).
  assert (names_distinct : NoDup (map fst p)).
  { apply (Permutation_NoDup (l := map fst all)).
    - now apply Permutation_map.
    - apply number_names_distinct. }
  exists (map alone (map fst p)). split.
  - rewrite start_names, map_ordered_alone.
    now apply Permutation_map, Permutation_map, Permutation_sym.
  - rewrite map_ordered_alone. intros x. rewrite count_map.
    change 1 with (length [x]). apply NoDup_incl_length; [now apply NoDup_filter |].
    intros u here. apply filter_In in here as [_ at_x]. apply touches_spec in at_x. left. tauto.
  - rewrite links_alone. rewrite map_length in long.
    apply distinct_map; [| now apply cycle_steps_distinct].
    intros [u v] [x y] step other E. apply ordered_same in E as [E | [= -> ->]]; [exact E |].
    destruct (one_way (map fst p) y x names_distinct); [now rewrite map_length | easy | easy].
  - intros e here. rewrite links_alone in here. apply in_map_iff in here as ([x y] & <- & step).
    assert (differ : x <> y).
    { intros ->. rewrite map_length in long.
      destruct (one_way (map fst p) y y names_distinct); [now rewrite map_length | easy | easy]. }
    rewrite cycle_steps_map in step.
    apply in_map_iff in step as ([[x' a] [y' b]] & [= -> ->] & step).
    assert (joined : meet a b = true).
    { apply along. rewrite cycle_steps_map.
      apply (in_map (fun e => (snd (fst e), snd (snd e))) _ _ step). }
    apply cycle_steps_in in step as [x_here y_here].
    apply (Permutation_in _ (Permutation_sym same)), all_at in x_here, y_here.
    split; [now apply (edge_ordered meet fixed body meet_sym x y a b) |].
    unfold unswept, first_name.
    destruct (ordered_cases x y) as [[_ ->] | [_ ->]]; cbn [fst snd]; lia.
  - intros e [].
Qed.

Lemma start_tours : 3 <= length (fixed ++ body) -> forall c,
  completes (coming 0) (apart 0) (rename_at 0 (start fixed width body)) c ->
  exists h, tour (fixed ++ body) h.
Proof.
  intros three c [named linked]. rewrite start_names in named.
  assert (single : c = map alone (map fst c)).
  { rewrite map_map. rewrite <- (map_id c) at 1. apply map_ext_in. intros [x y] here.
    apply (in_map ordered) in here. rewrite named in here.
    apply in_map_iff in here as (z & E & _). unfold alone in *. cbn [fst].
    destruct (ordered_ends x y) as [E' | E']; rewrite E' in E; congruence. }
  set (g := map fst c) in *. rewrite single in named, linked. rewrite map_ordered_alone in named.
  assert (same : Permutation g (map fst all)).
  { assert (firsts : forall l, map fst (map alone l) = l)
      by (intros l; rewrite map_map; apply map_id).
    apply (Permutation_map fst) in named. now rewrite !firsts in named. }
  assert (some : exists a0 : A, True)
    by (destruct (fixed ++ body) as [| a0]; [cbn in three; lia | now exists a0]).
  destruct some as (a0 & _).
  set (name_of x := nth (Pos.to_nat x - 1) (fixed ++ body) a0).
  assert (named_at : forall x a, at_name fixed body x = Some a -> name_of x = a).
  { intros x a E. unfold at_name in E. unfold name_of. now apply nth_error_nth. }
  assert (back : map name_of (map fst all) = fixed ++ body).
  { rewrite map_map. transitivity (map snd all).
    - apply map_ext_in. intros [x a] here. now apply named_at, all_at.
    - apply number_items. }
  exists (map name_of g). split; [| split].
  - rewrite (Permutation_length (Permutation_map name_of same)), back. exact three.
  - rewrite <- back. now apply Permutation_map.
  - intros u v step. rewrite cycle_steps_map in step.
    apply in_map_iff in step as ([x y] & [= <- <-] & step).
    assert (come : coming 0 (ordered (x, y))).
    { apply linked. rewrite links_alone. now apply in_map. }
    destruct come as [edge_here _]. destruct (ordered (x, y)) as [p q] eqn:E.
    destruct (edge_at meet fixed body meet_sym p q edge_here x y E)
      as (a & b & x_at & y_at & joined).
    now rewrite (named_at x a x_at), (named_at y b y_at).
Qed.

End Tour.

(** ** The fixed vertices, at the end *)

Lemma none_left : forall s c, Permutation (map ordered c) (map ordered s ++ map alone []) ->
  (forall e, In e (links c) -> False) -> s = [].
Proof.
  intros [| p s] c named linked; [reflexivity | exfalso]. rewrite app_nil_r in named.
  destruct p as [x y].
  destruct (ends_linked c (ordered (x, y)) x) as (e & here & _).
  - rewrite named. now left.
  - apply touches_first.
  - exact (linked e here).
Qed.

Lemma nothing_after : forall (A : Type) (meet : A -> A -> bool) (l : list A) e,
  coming_names meet [] l (length l) e -> False.
Proof.
  intros A meet l [p q] ((_ & a & b & p_at & q_at & _) & p_open & _).
  unfold unswept, first_name, at_name in *. cbn [app length fst snd] in *.
  assert (inside : Pos.to_nat p - 1 < length l) by (apply nth_error_Some; congruence). lia.
Qed.

Lemma completed_spec : forall ss, completed ss = true <-> In [] ss.
Proof.
  intros ss. unfold completed. rewrite existsb_exists. split.
  - intros ([| p s] & here & E); [exact here | discriminate].
  - intros here. now exists [].
Qed.

Section Answer.

Context {A : Type}.
Variable meet : A -> A -> bool.
Variables fixed body : list A.
Hypothesis meet_sym : forall a b, In a (fixed ++ body) -> In b (fixed ++ body) ->
  meet a b = meet b a.

Let size := length body.

(** What is still to come when the body is swept, are the edges among the fixed vertices. *)
Lemma coming_fixed : forall e,
  coming_names meet fixed body size e <-> coming_names meet [] fixed 0 e.
Proof.
  intros [p q]. unfold coming_names, edge_names, at_name, unswept, first_name.
  cbn [fst snd app length]. split.
  - intros ((less & a & b & p_at & q_at & joined) & p_open & q_open).
    assert (bound : forall x c, nth_error (fixed ++ body) (Pos.to_nat x - 1) = Some c ->
              (x < Pos.of_succ_nat (length fixed))%positive \/ length fixed + size < Pos.to_nat x ->
              Pos.to_nat x <= length fixed).
    { intros x c E [low | high]; [lia |].
      assert (inside : Pos.to_nat x - 1 < length (fixed ++ body))
        by (apply nth_error_Some; congruence).
      rewrite app_length in inside. unfold size in high. lia. }
    assert (p_low := bound p a p_at p_open). assert (q_low := bound q b q_at q_open).
    rewrite nth_error_app1 in p_at, q_at by lia.
    split; [split; [exact less | now exists a, b] |]. lia.
  - intros ((less & a & b & p_at & q_at & joined) & _).
    assert (bound : forall x c, nth_error fixed (Pos.to_nat x - 1) = Some c ->
              Pos.to_nat x <= length fixed).
    { intros x c E. assert (inside : Pos.to_nat x - 1 < length fixed)
        by (apply nth_error_Some; congruence). lia. }
    assert (p_low := bound p a p_at). assert (q_low := bound q b q_at).
    split; [split; [exact less |] | lia].
    exists a, b. now rewrite !nth_error_app1 by lia.
Qed.

(** So the names that are left in a state are theirs. *)
Lemma ends_fixed : forall s c, Permutation (map ordered c) (map ordered s) ->
  (forall e, In e (links c) -> coming_names meet [] fixed 0 e) ->
  forall p z, In p s -> touches z p = true -> (z < first_name fixed)%positive.
Proof.
  intros s c named linked p z here at_z.
  destruct (ends_linked c (ordered p) z) as ([x y] & e_here & at_e).
  - rewrite named. now apply in_map.
  - now rewrite ordered_touches.
  - apply linked in e_here as ((_ & a & b & x_at & y_at & _) & _). cbn [fst snd] in *.
    unfold at_name, first_name in *. cbn [app] in *.
    assert (bound : forall w d, nth_error fixed (Pos.to_nat w - 1) = Some d ->
              Pos.to_nat w <= length fixed).
    { intros w d E. assert (inside : Pos.to_nat w - 1 < length fixed)
        by (apply nth_error_Some; congruence). lia. }
    apply bound in x_at, y_at. apply touches_spec in at_e as [<- | <-]; lia.
Qed.

Lemma shift_fixed : forall i s,
  (forall p z, In p s -> touches z p = true -> (shift fixed i z < first_name fixed)%positive) ->
  rename (shift fixed i) s = s.
Proof.
  intros i s low. unfold rename. rewrite <- (map_id s) at 2. apply map_ext_in.
  intros [x y] here. unfold rename_pair. cbn [fst snd].
  assert (same : forall z, (shift fixed i z < first_name fixed)%positive -> shift fixed i z = z).
  { intros z. unfold shift. destruct (Pos.ltb_spec z (first_name fixed)); [easy | lia]. }
  f_equal; apply same, (low (x, y)); try exact here; apply touches_spec; auto.
Qed.

Variable width : nat.
Hypothesis wide : 1 <= width.
Hypothesis short : reach_short meet body width.
Hypothesis three : 3 <= length (fixed ++ body).

Theorem answer_spec : answer meet fixed width body = true <-> exists h, tour meet (fixed ++ body) h.
Proof.
  unfold answer, finish. rewrite completed_spec.
  assert (nameless_end : forall w, nameless fixed body w (length body) = [])
    by (intros w; unfold nameless; replace (length body - length body - w) with 0 by lia; easy).
  assert (nameless_fixed : forall i, nameless [] fixed (length fixed) i = [])
    by (intros i; unfold nameless; replace (length fixed - i - length fixed) with 0 by lia; easy).
  assert (fixed_short : reach_short meet fixed (length fixed)).
  { intros done b rest E x here. rewrite skipn_all2 in here; [easy |].
    rewrite E, app_length. cbn [length]. lia. }
  assert (fixed_sym : forall a b, In a ([] ++ fixed) -> In b ([] ++ fixed) -> meet a b = meet b a).
  { intros a b a_in b_in. apply meet_sym; apply in_or_app; now left. }
  assert (fixed_none : forall s, rename (shift (A := A) [] 0) s = s).
  { intros s. unfold rename. rewrite (map_ext _ (fun e => e)); [apply map_id |].
    intros [x y]. unfold rename_pair, shift. cbn [fst snd].
    f_equal; destruct (_ <? _)%positive; lia. }
  set (middle := run (first_name fixed) width (plan meet fixed width body)
                   [start fixed width body]).
  split.
  - intros here.
    assert (inside : exists s c, In s middle /\ completes (coming_names meet [] fixed 0) [] s c).
    { destruct fixed as [| f fs] eqn:is_fixed.
      - exists [], []. split; [exact here |]. split; [reflexivity | intros e []].
      - rewrite <- is_fixed in *.
        destruct (run_back meet []) with
          (body := fixed) (width := length fixed) (rest := fixed) (done := @nil A) (ss := middle)
          (s' := @nil (vertex * vertex)) (c' := @nil (vertex * vertex)) as (s & c & s_here & fit).
        + exact fixed_sym.
        + rewrite is_fixed. cbn. lia.
        + exact fixed_short.
        + reflexivity.
        + exact here.
        + split; [now rewrite nameless_fixed | intros e []].
        + rewrite nameless_fixed in fit. cbn [length] in fit. rewrite fixed_none in fit.
          now exists s, c. }
    destruct inside as (s & c & s_here & named & linked). rewrite app_nil_r in named.
    assert (same : rename (shift fixed size) s = s).
    { apply shift_fixed. intros p z p_here at_z.
      assert (low := ends_fixed s c named linked p z p_here at_z).
      unfold shift. now rewrite (proj2 (Pos.ltb_lt _ _)). }
    destruct (run_back meet fixed body meet_sym width wide short body [] [start fixed width body]
                eq_refl s c s_here) as (s0 & c0 & [<- | []] & fit).
    + rewrite nameless_end. fold size. rewrite same. split; [now rewrite app_nil_r |].
      intros e e_here. now apply coming_fixed, linked.
    + now apply (start_tours meet fixed body width meet_sym three c0).
  - intros (h & round).
    destruct (tour_starts meet fixed body width meet_sym h round) as (c & fit).
    destruct (run_sound meet fixed body meet_sym width wide short body [] [start fixed width body]
                eq_refl _ c (or_introl eq_refl) fit) as (s & c' & s_here & fit').
    fold middle in s_here. rewrite nameless_end in fit'. fold size in fit'.
    assert (named := pieces_named _ _ _ _ _ fit'). rewrite app_nil_r in named.
    assert (same : rename (shift fixed size) s = s).
    { apply shift_fixed. intros p z p_here at_z.
      apply (ends_fixed _ c' named) with (p := rename_pair (shift fixed size) p).
      - intros e here. now apply coming_fixed, (links_come _ _ _ _ _ fit').
      - now apply (in_map (rename_pair (shift fixed size))).
      - destruct p as [x y]. apply touches_spec in at_z. apply touches_spec.
        cbn [fst snd] in *. destruct at_z as [-> | ->]; auto. }
    rewrite same in fit'. apply (fits_same _ _ _ _ _ _ coming_fixed) in fit'.
    destruct fixed as [| f fs] eqn:is_fixed.
    + assert (E : s = []).
      { apply (none_left s c' (pieces_named _ _ _ _ _ fit')).
        intros e here. apply (nothing_after A meet [] e). now apply (links_come _ _ _ _ _ fit'). }
      cbn [plan run]. now subst s.
    + rewrite <- is_fixed in *.
      destruct (run_sound meet []) with
        (body := fixed) (width := length fixed) (rest := fixed) (done := @nil A) (ss := middle)
        (s := s) (c := c')
        as (t & c2 & t_here & fit2).
      * exact fixed_sym.
      * rewrite is_fixed. cbn. lia.
      * exact fixed_short.
      * reflexivity.
      * exact s_here.
      * cbn [length]. rewrite nameless_fixed, fixed_none. exact fit'.
      * rewrite nameless_fixed in fit2.
        assert (E : rename (shift (A := A) [] (length fixed)) t = []).
        { apply (none_left _ c2 (pieces_named _ _ _ _ _ fit2)).
          intros e here. apply (nothing_after A meet fixed e).
          now apply (links_come _ _ _ _ _ fit2). }
        apply map_eq_nil in E as ->. exact t_here.
Qed.

End Answer.

(** * Endless claims: the steps of a plan

    With the names of the whole graph a step of the plan is a step of the sweep, so no cycle is
    lost in it (SweepFits.v), and none appears (EndlessJoin.v). *)

From Coq Require Import Bool List Arith PArith FMapPositive Permutation Lia.
From Certify Require Import Statement Steps Question Normal Edges Facts Sweep SweepChain SweepFits
  EndlessRename EndlessJoin EndlessPlan EndlessNames.
Import ListNotations.

(** No edge has to be used: of the question only this is left. *)
Definition nothing : question := {| order := 0; edges := []; needed := [] |}.

Section Steps.

Context {A : Type}.
Variable meet : A -> A -> bool.
Variables fixed body : list A.
Hypothesis meet_sym : forall a b, In a (fixed ++ body) -> In b (fixed ++ body) ->
  meet a b = meet b a.

Let k := length fixed.
Let first := first_name fixed.

Definition at_name (p : vertex) : option A := nth_error (fixed ++ body) (Pos.to_nat p - 1).

(** The edges, with the names that the vertices of the whole graph have. *)
Definition edge_names (e : vertex * vertex) : Prop :=
  (fst e < snd e)%positive /\
  exists a b, at_name (fst e) = Some a /\ at_name (snd e) = Some b /\ meet a b = true.

(** When [i] vertices of the body are swept: what the names in a state mean, which vertices are
    not swept, and which edges are still to come. With a window of [width], also which vertices have
    no name yet. *)
Definition shift (i : nat) (x : vertex) : vertex :=
  if (x <? first)%positive then x else Pos.of_nat (Pos.to_nat x + i).

Definition unswept (i : nat) (p : vertex) : Prop := (p < first)%positive \/ k + i < Pos.to_nat p.

Definition coming_names (i : nat) (e : vertex * vertex) : Prop :=
  edge_names e /\ unswept i (fst e) /\ unswept i (snd e).

Lemma first_nat : Pos.to_nat first = S k.
Proof. unfold first, first_name, k. lia. Qed.

Lemma shift_rises : forall i a b, (a < b)%positive -> (shift i a < shift i b)%positive.
Proof.
  intros i a b less. unfold shift.
  destruct (Pos.ltb_spec a first), (Pos.ltb_spec b first); lia.
Qed.

Lemma edge_ordered : forall p q a b, p <> q -> at_name p = Some a -> at_name q = Some b ->
  meet a b = true -> edge_names (ordered (p, q)).
Proof.
  intros p q a b differ p_at q_at joined.
  destruct (ordered_cases p q) as [[less ->] | [less ->]]; (split; [cbn [fst snd]; lia |]).
  - now exists a, b.
  - exists b, a. apply nth_error_In in p_at as a_in, q_at as b_in. now rewrite meet_sym.
Qed.

Lemma edge_at : forall p q, edge_names (p, q) -> forall v w, ordered (v, w) = (p, q) ->
  exists a b, at_name v = Some a /\ at_name w = Some b /\ meet a b = true.
Proof.
  intros p q (_ & a & b & p_at & q_at & joined) v w E. cbn [fst snd] in *.
  destruct (ordered_ends v w) as [E' | E']; rewrite E' in E; injection E as -> ->.
  - now exists a, b.
  - exists b, a. apply nth_error_In in p_at as a_in, q_at as b_in. now rewrite meet_sym.
Qed.

Variable width : nat.
Hypothesis wide : 1 <= width.

Definition nameless (i : nat) : list vertex :=
  map Pos.of_nat (seq (k + i + width + 1) (length body - i - width)).

(** No edge leads out of the window. *)
Definition reach_short : Prop := forall done b rest, body = done ++ b :: rest ->
  forall x, In x (skipn width rest) -> meet b x = false.

Hypothesis short : reach_short.

(** ** One step *)

Section Step.

Variables (done rest : list A) (b : A).
Hypothesis parts : body = done ++ b :: rest.

Let i := length done.
Let v := shift i first.
Let names := neighbour_names meet fixed width b rest.
Let room := Nat.compare (length rest) width.

Lemma v_nat : Pos.to_nat v = k + i + 1.
Proof.
  unfold v, shift. rewrite Pos.ltb_irrefl. pose proof first_nat. lia.
Qed.

Lemma v_at : at_name v = Some b.
Proof.
  unfold at_name. rewrite v_nat, parts. replace (k + i + 1 - 1) with (k + i) by lia.
  rewrite nth_error_app2 by (unfold k; lia).
  replace (k + i - length fixed) with i by (unfold k; lia).
  rewrite nth_error_app2 by (unfold i; lia). unfold i. now rewrite Nat.sub_diag.
Qed.

(** The window holds the fixed vertices and the next ones. *)
Lemma in_window : forall u a, In (u, a) (window fixed width rest) <->
  at_name (shift i u) = Some a /\
  ((u < first)%positive \/ (first < u)%positive /\ Pos.to_nat u <= Pos.to_nat first + width).
Proof.
  intros u a. unfold window. rewrite in_app_iff, !in_number. fold first.
  pose proof first_nat as size. unfold at_name, shift.
  destruct (Pos.ltb_spec u first) as [less | more].
  - rewrite nth_error_app1 by (unfold k in *; lia). change (Pos.to_nat 1) with 1.
    split; [intros [[_ E] | [above _]]; [auto | lia] |].
    intros [E _]. left. split; [lia | exact E].
  - split.
    + intros [[_ E] | [above E]].
      * exfalso. apply (f_equal (fun o => match o with Some _ => true | None => false end)) in E.
        rewrite (proj2 (nth_error_None _ _)) in E; [easy | unfold k in *; lia].
      * assert (near : Pos.to_nat u - Pos.to_nat (Pos.succ first) < width).
        { assert (bound : Pos.to_nat u - Pos.to_nat (Pos.succ first) < length (firstn width rest))
            by (apply nth_error_Some; congruence).
          rewrite firstn_length in bound. lia. }
        split; [| lia].
        rewrite nth_error_app2 by (unfold k in *; lia). rewrite parts.
        rewrite nth_error_app2 by (unfold k, i in *; lia).
        replace (Pos.to_nat (Pos.of_nat (Pos.to_nat u + i)) - 1 - length fixed - length done)
          with (S (Pos.to_nat u - Pos.to_nat (Pos.succ first))) by (unfold k, i in *; lia).
        cbn [nth_error]. rewrite <- E. rewrite <- (firstn_skipn width rest) at 1.
        apply nth_error_app1. apply nth_error_Some. congruence.
    + intros [E [less | [above near]]]; [lia |]. right. split; [lia |].
      rewrite nth_error_app2 in E by (unfold k in *; lia). rewrite parts in E.
      rewrite nth_error_app2 in E by (unfold k, i in *; lia).
      replace (Pos.to_nat (Pos.of_nat (Pos.to_nat u + i)) - 1 - length fixed - length done)
        with (S (Pos.to_nat u - Pos.to_nat (Pos.succ first))) in E by (unfold k, i in *; lia).
      cbn [nth_error] in E. rewrite <- (firstn_skipn width rest) in E.
      destruct (Nat.lt_ge_cases (Pos.to_nat u - Pos.to_nat (Pos.succ first))
                  (length (firstn width rest))) as [inside | outside].
      * now rewrite nth_error_app1 in E.
      * exfalso. assert (all : length (firstn width rest) < width) by lia.
        rewrite firstn_length in all. rewrite (skipn_all2 rest) in E by lia.
        rewrite app_nil_r in E. now rewrite (proj2 (nth_error_None _ _)) in E.
Qed.

Lemma in_names : forall u, In u names <-> exists a, In (u, a) (window fixed width rest) /\
  meet b a = true.
Proof.
  intros u. unfold names, neighbour_names. rewrite in_map_iff. split.
  - intros ([w a] & <- & here). apply filter_In in here. now exists a.
  - intros (a & here & joined). exists (u, a). now rewrite filter_In.
Qed.

Let us := map (fun u => (u, false)) names.

Lemma us_fst : map fst (map (rename_choice (shift i)) us) = map (shift i) names.
Proof. unfold us. rewrite !map_map. reflexivity. Qed.

(** A neighbour to come: where it is. *)
Lemma names_come : forall u, In u names ->
  coming_names i (ordered (v, shift i u)) /\ ~ In (shift i u) (nameless (S i)).
Proof.
  intros u here. apply in_names in here as (a & here & joined).
  apply in_window in here as [u_at place].
  pose proof first_nat as size. pose proof v_nat as v_is.
  assert (u_open : unswept i (shift i u)).
  { unfold unswept, shift in *. destruct (Pos.ltb_spec u first); [now left |]. right. lia. }
  assert (v_open : unswept i v) by (right; lia).
  assert (differ : v <> shift i u).
  { unfold v. intros E. apply (rename_injective _ (shift_rises i)) in E. lia. }
  split; [split |].
  - now apply (edge_ordered v (shift i u) b a); try exact v_at.
  - destruct (ordered_ends v (shift i u)) as [-> | ->]; now split.
  - unfold nameless. rewrite in_map_iff. intros (j & E & range). apply in_seq in range.
    unfold shift in E. destruct (Pos.ltb_spec u first); lia.
Qed.

Lemma step_ready : ready nothing (coming_names i) (nameless (S i)) v
  (map (rename_choice (shift i)) us).
Proof.
  split.
  - rewrite us_fst. apply distinct_map.
    + intros x y _ _. apply rename_injective, shift_rises.
    + unfold names, neighbour_names.
      assert (all : NoDup (map fst (window fixed width rest))).
      { unfold window. rewrite map_app. apply distinct_app; try apply number_names_distinct.
        intros x here there. rewrite in_map_iff in here, there.
        destruct here as ([x1 a1] & <- & here), there as ([x2 a2] & E & there).
        cbn [fst] in E. subst x2. apply in_number in here as [_ here], there as [above _].
        apply (f_equal (fun o => match o with Some _ => true | None => false end)) in here.
        rewrite (proj2 (nth_error_None _ _)) in here; [easy |].
        unfold first_name in above. lia. }
      clear -all. revert all. generalize (window fixed width rest).
      induction l as [| p l IH]; intros all; [constructor |]. cbn [map] in all.
      inversion_clear all as [| ? ? fresh others]. cbn [filter].
      destruct (meet b (snd p)); [| now apply IH]. cbn [map]. constructor; [| now apply IH].
      rewrite in_map_iff. intros (q & E & q_here). apply filter_In in q_here as [q_here _].
      apply fresh. rewrite <- E. now apply in_map.
  - intros u must here. apply in_map_iff in here as ([w m] & [= <- <-] & here).
    unfold us in here. apply in_map_iff in here as (x & [= <- <-] & here). now apply names_come.
  - intros u here. apply in_map_iff in here as ([w m] & [= _ E] & here).
    cbn [snd] in E. unfold us in here. apply in_map_iff in here as (x & [= _ E'] & _). congruence.
  - intros [p q] (joined & p_open & q_open) at_v. cbn [fst snd] in *.
    pose proof first_nat as size. pose proof v_nat as v_is.
    assert (other_end : exists w, ordered (v, w) = (p, q) /\ w <> v /\ unswept i w).
    { assert (less : (p < q)%positive) by apply joined.
      apply touches_spec in at_v as [<- | <-]; [exists q | exists p];
        (split; [| split; [lia | assumption]]).
      - now destruct (ordered_cases v q) as [[] | []]; [| lia].
      - now destruct (ordered_cases v p) as [[] | []]; [lia |]. }
    destruct other_end as (w & E & differ & w_open).
    destruct (edge_at p q joined v w E) as (a & c & v_is_at & w_at & meets).
    rewrite v_at in v_is_at. injection v_is_at as <-.
    exists w. split; [| congruence]. rewrite us_fst, in_map_iff.
    destruct w_open as [w_fixed | w_later].
    + exists w. assert (same : shift i w = w)
        by (unfold shift; now rewrite (proj2 (Pos.ltb_lt _ _))).
      split; [exact same |]. apply in_names. exists c. split; [| exact meets].
      apply in_window. rewrite same. auto.
    + assert (later : k + i + 1 < Pos.to_nat w) by lia.
      set (u := Pos.of_nat (Pos.to_nat w - i)).
      assert (same : shift i u = w).
      { unfold shift, u. destruct (Pos.ltb_spec (Pos.of_nat (Pos.to_nat w - i)) first); lia. }
      exists u. split; [exact same |]. apply in_names. exists c. split; [| exact meets].
      apply in_window. rewrite same. split; [exact w_at |]. right. split; [unfold u; lia |].
      destruct (Nat.le_gt_cases (Pos.to_nat u) (Pos.to_nat first + width)) as [|far]; [easy |].
      exfalso. rewrite (short done b rest parts c) in meets; [discriminate |].
      unfold at_name in w_at. rewrite nth_error_app2 in w_at by (unfold k in *; lia).
      rewrite parts in w_at. rewrite nth_error_app2 in w_at by (unfold k, i in *; lia).
      replace (Pos.to_nat w - 1 - length fixed - length done)
        with (S (width + (Pos.to_nat u - Pos.to_nat first - width - 1))) in w_at
        by (unfold u, k, i in *; lia).
      cbn [nth_error] in w_at. rewrite <- (firstn_skipn width rest) in w_at.
      rewrite nth_error_app2 in w_at by (rewrite firstn_length; lia).
      now apply nth_error_In in w_at.
Qed.

Lemma coming_next : forall e, off v (coming_names i) e <-> coming_names (S i) e.
Proof.
  intros [p q]. unfold off, coming_names, unswept. cbn [fst snd].
  pose proof v_nat. pose proof first_nat. split.
  - intros [(joined & p_open & q_open) off_v].
    assert (p_not : v <> p /\ v <> q).
    { split; intros E; rewrite (proj2 (touches_spec v p q)) in off_v; auto; discriminate. }
    split; [exact joined |]. split; lia.
  - intros (joined & p_open & q_open).
    split; [split; [exact joined | split; lia] |].
    destruct (touches v (p, q)) eqn:E; [| reflexivity]. apply touches_spec in E. lia.
Qed.

Lemma names_apart : map (shift i) (new_names first width room) ++ nameless (S i) = nameless i.
Proof.
  unfold nameless, new_names, room. pose proof first_nat.
  assert (size : length body = i + S (length rest))
    by (rewrite parts, app_length; reflexivity).
  assert (new : shift i (Pos.of_nat (Pos.to_nat first + width)) = Pos.of_nat (k + i + width + 1)).
  { unfold shift. destruct (Pos.ltb_spec (Pos.of_nat (Pos.to_nat first + width)) first); lia. }
  destruct (Nat.compare_spec (length rest) width) as [E | less | more]; cbn [map app];
    rewrite ?new.
  - replace (length body - S i - width) with 0 by lia.
    replace (length body - i - width) with 1 by lia. reflexivity.
  - replace (length body - S i - width) with 0 by lia.
    replace (length body - i - width) with 0 by lia. reflexivity.
  - replace (length body - i - width) with (S (length body - S i - width)) by lia.
    cbn [seq map]. do 3 f_equal. lia.
Qed.

Lemma apart_full : nameless (S i) = [] <-> none_apart room = true.
Proof.
  unfold nameless, room.
  assert (size : length body = i + S (length rest))
    by (rewrite parts, app_length; reflexivity).
  destruct (Nat.compare_spec (length rest) width) as [E | less | more]; cbn [none_apart].
  - replace (length body - S i - width) with 0 by lia. easy.
  - replace (length body - S i - width) with 0 by lia. easy.
  - replace (length body - S i - width) with (S (length rest - width - 1)) by lia. easy.
Qed.

Lemma lower_shift : forall s, settled first s = true ->
  rename (shift (S i)) (lower_state first s) = rename (shift i) s.
Proof.
  intros s. unfold settled. rewrite forallb_forall. intros none.
  unfold rename, lower_state. rewrite map_map. apply map_ext_in. intros [x y] here.
  apply none in here. apply negb_true_iff in here. unfold touches in here. cbn [fst snd] in here.
  apply orb_false_iff in here as [x_not y_not]. apply Pos.eqb_neq in x_not, y_not.
  pose proof first_nat. unfold rename_pair. cbn [fst snd].
  assert (same : forall z, z <> first -> shift (S i) (lower first z) = shift i z).
  { intros z z_not. unfold shift, lower.
    destruct (Pos.ltb_spec z first) as [less | more].
    - now rewrite (proj2 (Pos.ltb_lt z first)).
    - destruct (Pos.ltb_spec (Pos.pred z) first); lia. }
  now rewrite !same.
Qed.

Lemma step_sound : forall s c,
  fits nothing (coming_names i) (nameless i) (rename (shift i) s) c ->
  exists s' c', In s' (take_step first width (room, names) s) /\
    fits nothing (coming_names (S i)) (nameless (S i)) (rename (shift (S i)) s') c'.
Proof.
  intros s c fit. rewrite <- names_apart in fit.
  destruct (advance_sound nothing v (none_apart room) (nameless (S i))
              (proj1 apart_full) (coming_names i)
              (map (shift i) (new_names first width room)) _ (rename (shift i) s) c step_ready)
    as (t & c' & here & fit'); [| exact fit |].
  - unfold nameless. rewrite in_map_iff. intros (j & E & range). apply in_seq in range.
    pose proof v_nat. lia.
  - unfold v in here. rewrite advance_rename in here by apply shift_rises.
    apply in_map_iff in here as (t0 & <- & here).
    assert (is_settled : settled first t0 = true).
    { apply forallb_forall. intros [x y] x_here. apply negb_true_iff.
      destruct (touches first (x, y)) eqn:at_first; [exfalso | reflexivity].
      destruct fit' as [named _ _ linked _].
      destruct (ends_linked c' (ordered (rename_pair (shift i) (x, y))) v) as (e & e_link & at_v).
      - rewrite named. apply in_or_app. left.
        apply in_map, (in_map (rename_pair (shift i)) _ _ x_here).
      - rewrite ordered_touches. unfold touches, v, rename_pair in *. cbn [fst snd] in *.
        now rewrite !(rename_eqb _ (shift_rises i)).
      - apply linked in e_link as [_ off_v]. unfold touches in *. congruence. }
    exists (lower_state first t0), c'. split.
    + unfold take_step. cbn [fst snd]. apply in_map, filter_In. now split.
    + rewrite lower_shift by exact is_settled. revert fit'. apply fits_same, coming_next.
Qed.

Lemma step_back : forall s s' c',
  In s' (take_step first width (room, names) s) ->
  completes (coming_names (S i)) (nameless (S i)) (rename (shift (S i)) s') c' ->
  exists c, completes (coming_names i) (nameless i) (rename (shift i) s) c.
Proof.
  intros s s' c' here fit. unfold take_step in here. cbn [fst snd] in here.
  apply in_map_iff in here as (t & <- & here). apply filter_In in here as [here is_settled].
  rewrite lower_shift in fit by exact is_settled.
  rewrite <- names_apart.
  apply advance_back
    with (v := v) (full := none_apart room) (us := map (rename_choice (shift i)) us)
    (s' := rename (shift i) t) (c' := c').
  - apply apart_full.
  - intros u must u_here. now apply (us_come _ _ _ _ _ step_ready) in u_here.
  - unfold v. rewrite advance_rename by apply shift_rises. now apply in_map.
  - revert fit. apply completes_more. intros e come. now apply coming_next.
Qed.

End Step.

(** ** All steps *)

Lemma run_sound : forall rest done ss, body = done ++ rest ->
  forall s c, In s ss ->
  fits nothing (coming_names (length done)) (nameless (length done))
    (rename (shift (length done)) s) c ->
  exists s' c', In s' (run first width (plan meet fixed width rest) ss) /\
    fits nothing (coming_names (length body)) (nameless (length body))
      (rename (shift (length body)) s') c'.
Proof.
  induction rest as [| b rest IH]; intros done ss parts s c here fit.
  - rewrite app_nil_r in parts. subst done. now exists s, c.
  - destruct (step_sound done rest b parts s c fit) as (t & c' & t_here & fit').
    assert (parts' : body = (done ++ [b]) ++ rest) by now rewrite <- app_assoc.
    cbn [plan run]. apply (IH (done ++ [b]) _ parts' t c').
    + apply in_gather. now exists s.
    + rewrite app_length. cbn [length]. rewrite Nat.add_1_r. exact fit'.
Qed.

Lemma run_back : forall rest done ss, body = done ++ rest ->
  forall s' c', In s' (run first width (plan meet fixed width rest) ss) ->
  completes (coming_names (length body)) (nameless (length body))
    (rename (shift (length body)) s') c' ->
  exists s c, In s ss /\
    completes (coming_names (length done)) (nameless (length done))
      (rename (shift (length done)) s) c.
Proof.
  induction rest as [| b rest IH]; intros done ss parts s' c' here fit.
  - rewrite app_nil_r in parts. subst done. now exists s', c'.
  - assert (parts' : body = (done ++ [b]) ++ rest) by now rewrite <- app_assoc.
    cbn [plan run] in here. destruct (IH _ _ parts' s' c' here fit) as (t & c & t_here & fit').
    rewrite app_length in fit'. cbn [length] in fit'. rewrite Nat.add_1_r in fit'.
    apply in_gather in t_here as (s & s_here & t_here). exists s.
    destruct (step_back done rest b parts s t c t_here fit') as (c0 & fit0). now exists c0.
Qed.

End Steps.

(** * Kind [sweep]: the state of a chain

    An edge of the cycle joins two pieces that follow each other in the chain, and the state
    that chooses the edge names the joined one; an edge that is not of the cycle changes
    nothing, in the state that does not choose it. So a state that names the pieces of the
    chain is found again after the choices at a vertex ([choices_sound]). *)

From Coq Require Import Bool List Arith PArith Permutation Lia.
From Certify Require Import Statement Question Edges Facts Sweep SweepChain.
Import ListNotations.

Section Fits.

Variable Q : question.

(** A chain, its state [s], the vertices not reached, and which edges are still to come. *)
Record fits (come : vertex * vertex -> Prop) (apart : list vertex) (s : state) (c : chain) :
    Prop := {
  pieces_named : Permutation (map ordered c) (map ordered s ++ map alone apart);
  pieces_apart : once (map ordered c);
  links_once : NoDup (links c);
  links_come : forall e, In e (links c) -> come e;
  needed_come : forall e, In e (needed Q) -> come e -> In e (links c)
}.

Lemma fits_renamed : forall come apart s apart' s' c,
  Permutation (map ordered s ++ map alone apart) (map ordered s' ++ map alone apart') ->
  fits come apart s c -> fits come apart' s' c.
Proof.
  intros come apart s apart' s' c E [named ? ? ? ?]. split; trivial.
  now rewrite named.
Qed.

Lemma fits_same : forall come come' apart s c,
  (forall e, come e <-> come' e) -> fits come apart s c -> fits come' apart s c.
Proof.
  intros come come' apart s c E [named few links_few linked needs]. split; trivial.
  - intros e here. now apply E, linked.
  - intros e need here. apply needs; [exact need | now apply E].
Qed.

Definition but (e : vertex * vertex) (come : vertex * vertex -> Prop) (f : vertex * vertex) :=
  come f /\ f <> e.

Lemma fits_without : forall come apart s c e,
  ~ In e (links c) -> fits come apart s c -> fits (but e come) apart s c.
Proof.
  intros come apart s c e out [named few links_few linked needs]. split; trivial.
  - intros f here. split; [now apply linked | congruence].
  - intros f need [f_come _]. now apply needs.
Qed.

(** [v] is not the end of a piece. *)
Definition inner (v : vertex) (c : chain) : Prop :=
  forall p, In p (map ordered c) -> touches v p = false.

Section With.

Variable come : vertex * vertex -> Prop.
Variables (apart : list vertex) (v u a : vertex) (s : state) (c : chain).
Hypothesis fit : fits come apart ((v, a) :: s) c.
Hypothesis chosen : In (ordered (v, u)) (links c).
Hypothesis u_reached : ~ In u apart.

(** The edge makes one piece of those that end in [v] and in [u], unless it
    closes the cycle. *)
Lemma fits_with :
  (a = u /\ s = [] /\ apart = [] /\ fits (but (ordered (v, u)) come) [] [] []) \/
  (a <> u /\ exists b rest c', take u s = Some (b, rest) /\
    fits (but (ordered (v, u)) come) apart ((a, b) :: rest) c' /\
    (a <> v -> inner v c')).
Proof.
  destruct fit as [named few links_few linked needs]. cbn [map app] in named.
  assert (v_only := once_only _ _ _ v few named (touches_first v a)).
  destruct (contract _ _ _ chosen) as [[E links_E] | (a' & b & rest & c' & E & E' & links_E)].
  - (* the last link *)
    left. rewrite E in named. apply Permutation_length_1_inv in named.
    inversion named as [[E1 E2]]. apply ordered_other in E1 as ->.
    apply app_eq_nil in E2 as [s_none apart_none].
    apply map_eq_nil in s_none as ->. apply map_eq_nil in apart_none as ->.
    repeat split; try easy.
    + intros x. cbn. lia.
    + constructor.
    + intros e need [e_come differ]. apply needs in e_come; [|exact need].
      rewrite links_E in e_come. now destruct e_come as [<- | []].
  - (* the piece of v, then that of u *)
    right.
    assert (same : ordered (v, a') = ordered (v, a)).
    { assert (here : In (ordered (v, a')) (ordered (v, a) :: map ordered s ++ map alone apart)).
      { rewrite <- named, E. now left. }
      destruct here as [here | here]; [now symmetry|].
      apply v_only in here. now rewrite touches_first in here. }
    apply ordered_other in same as ->.
    assert (others : Permutation (map ordered s ++ map alone apart) (ordered (u, b) :: rest)).
    { apply (Permutation_cons_inv (a := ordered (v, a))). now rewrite <- named. }
    assert (differ : a <> u).
    { intros ->. rewrite (ordered_swap v u) in E.
      assert (u_only := once_only _ _ _ u few E (touches_first u v)).
      specialize (u_only (ordered (u, b)) (or_introl eq_refl)).
      now rewrite touches_first in u_only. }
    split; [exact differ|].
    assert (here : In (ordered (u, b)) (map ordered s)).
    { assert (here : In (ordered (u, b)) (map ordered s ++ map alone apart)).
      { rewrite others. now left. }
      apply in_app_or in here as [here | here]; [exact here|].
      apply in_map_iff in here as (w & Ew & w_apart). exfalso. apply u_reached.
      assert (at_u := touches_first u b). rewrite <- Ew in at_u.
      apply touches_spec in at_u. destruct at_u; now subst. }
    destruct (take u s) as [(b', s')|] eqn:taken.
    2:{ apply (take_none _ _ taken) in here. now rewrite touches_first in here. }
    apply take_some in taken.
    assert (once_rest : once (ordered (u, b) :: rest)).
    { intros x. specialize (few x). rewrite (count_same _ _ _ _ E) in few.
      rewrite count_cons in few. lia. }
    assert (u_only := once_only _ _ _ u once_rest (Permutation_refl _) (touches_first u b)).
    assert (same : ordered (u, b') = ordered (u, b)).
    { assert (here' : In (ordered (u, b')) (ordered (u, b) :: rest)).
      { rewrite <- others. apply in_or_app. left. rewrite taken. now left. }
      destruct here' as [here' | here']; [now symmetry|].
      apply u_only in here'. now rewrite touches_first in here'. }
    apply ordered_other in same as ->.
    exists b, s', c'. split; [reflexivity|]. split.
    + split.
      * rewrite E'. cbn [map app]. apply perm_skip.
        apply (Permutation_cons_inv (a := ordered (u, b))).
        now rewrite <- others, taken.
      * rewrite E'. intros x. specialize (few x).
        rewrite (count_same _ _ _ _ E), !count_cons in few.
        rewrite count_cons. rewrite !ordered_touches in *. unfold touches in *. cbn [fst snd] in *.
        destruct (a =? x)%positive, (b =? x)%positive, (v =? x)%positive, (u =? x)%positive;
          cbn in *; lia.
      * rewrite links_E in links_few. now inversion links_few.
      * rewrite links_E in links_few. inversion links_few as [|? ? out _]; subst.
        intros e e_link. split; [|congruence].
        apply linked. rewrite links_E. now right.
      * intros e need [e_come e_differs]. apply needs in e_come; [|exact need].
        rewrite links_E in e_come. destruct e_come as [E2 | e_come]; [congruence | exact e_come].
    + intros a_differs p p_here. rewrite E' in p_here.
      assert (others_v : forall q, In q (ordered (u, b) :: rest) -> touches v q = false).
      { intros q q_here. apply v_only. now rewrite others. }
      destruct p_here as [<- | p_here]; [|apply others_v; now right].
      rewrite ordered_touches.
      specialize (others_v _ (or_introl eq_refl)). rewrite ordered_touches in others_v.
      unfold touches in *. cbn [fst snd] in *. apply orb_false_iff in others_v as [_ ->].
      rewrite orb_false_r. now apply Pos.eqb_neq.
Qed.

End With.

(** ** The choices at a vertex *)

Definition pair_dec : forall p q : vertex * vertex, {p = q} + {p <> q}.
Proof. decide equality; apply Pos.eq_dec. Defined.

(** [us] lists the edges still to come at [v], to vertices that have been reached. *)
Record ready (come : vertex * vertex -> Prop) (apart : list vertex) (v : vertex)
    (us : list (vertex * bool)) : Prop := {
  us_distinct : NoDup (map fst us);
  us_come : forall u must, In (u, must) us -> come (ordered (v, u)) /\ ~ In u apart;
  us_needed : forall u, In (u, true) us -> In (ordered (v, u)) (needed Q);
  us_all : forall e, come e -> touches v e = true ->
    exists u, In u (map fst us) /\ e = ordered (v, u)
}.

Lemma ready_rest : forall come apart v u must us,
  ready come apart v ((u, must) :: us) -> ready (but (ordered (v, u)) come) apart v us.
Proof.
  intros come apart v u must us [distinct comes need all].
  inversion distinct as [|? ? u_new distinct']; subst. cbn [fst] in u_new. split.
  - exact distinct'.
  - intros w w_must here. destruct (comes w w_must (or_intror here)) as [w_come w_reached].
    split; [|exact w_reached]. split; [exact w_come|].
    intros E. apply ordered_other in E as ->. apply u_new, (in_map fst _ _ here).
  - intros w here. apply need. now right.
  - intros e [e_come differ] at_v. destruct (all e e_come at_v) as (w & [here | here] & E).
    + cbn in here. congruence.
    + now exists w.
Qed.

Definition off (v : vertex) (come : vertex * vertex -> Prop) (e : vertex * vertex) : Prop :=
  come e /\ touches v e = false.

Lemma off_but : forall come v u e, off v (but (ordered (v, u)) come) e <-> off v come e.
Proof.
  intros come v u e. unfold off, but. split; [tauto|]. intros [e_come e_off].
  repeat split; trivial. intros ->. now rewrite touches_first in e_off.
Qed.

(** One of the states [ss] fits when no edge at [v] is to come any more. *)
Definition found (come : vertex * vertex -> Prop) (apart : list vertex) (v : vertex)
    (ss : list state) : Prop :=
  exists s c, In s ss /\ fits (off v come) apart s c.

Lemma found_but : forall come apart v u ss ss',
  incl ss ss' -> found (but (ordered (v, u)) come) apart v ss -> found come apart v ss'.
Proof.
  intros come apart v u ss ss' part (s & c & here & fit). exists s, c.
  split; [now apply part|]. revert fit. apply fits_same, off_but.
Qed.

Lemma inner_unlinked : forall c v u, inner v c -> ~ In (ordered (v, u)) (links c).
Proof.
  intros c v u in_v here.
  assert (at_v : exists a, In (ordered (v, a)) (map ordered c)).
  { destruct (contract c v u here) as [[E _] | (a & b & rest & c' & E & _)].
    - exists u. rewrite E. now left.
    - exists a. rewrite E. now left. }
  destruct at_v as (a & at_v). apply in_v in at_v. now rewrite touches_first in at_v.
Qed.

Definition with_hand (v : vertex) (hand : option vertex) (s : state) : state :=
  match hand with Some a => (v, a) :: s | None => s end.

Lemma choices_sound : forall v all_reached apart, (apart = [] -> all_reached = true) ->
  forall us come hand s c,
  ready come apart v us -> fits come apart (with_hand v hand s) c -> (hand = None -> inner v c) ->
  found come apart v (choices v all_reached hand s us).
Proof.
  intros v all_reached apart full us.
  induction us as [|(u, must) us IH]; intros come hand s c set_ fit in_v.
  - destruct hand as [a|].
    + (* the piece in hand would have a link at [v] *)
      exfalso. destruct fit as [named _ _ linked _].
      destruct (ends_linked c (ordered (v, a)) v) as (e & e_link & at_v).
      * rewrite named. now left.
      * apply touches_first.
      * now destruct (us_all _ _ _ _ set_ e (linked e e_link) at_v) as (u & [] & _).
    + exists s, c. split; [now left|]. revert fit. apply fits_same.
      intros e. unfold off. split; [|tauto]. intros e_come. split; [exact e_come|].
      destruct (touches v e) eqn:at_v; [|reflexivity].
      now destruct (us_all _ _ _ _ set_ e e_come at_v) as (u & [] & _).
  - destruct (us_come _ _ _ _ set_ u must (or_introl eq_refl)) as [u_come u_reached].
    assert (set' := ready_rest _ _ _ _ _ _ set_).
    cbn [choices]. destruct (in_dec pair_dec (ordered (v, u)) (links c)) as [chosen | out].
    + (* an edge of the cycle: one of the states with it *)
      destruct hand as [a|]; [|now apply inner_unlinked in chosen; [|apply in_v]].
      destruct (fits_with come apart v u a s c fit chosen u_reached)
        as [(-> & -> & -> & fit') | (differ & b & rest & c' & taken & fit' & in_v')].
      * rewrite Pos.eqb_refl, (full eq_refl) in *.
        apply (found_but _ _ _ u _ _ (incl_appl _ (incl_refl _))), (IH _ _ _ []); easy.
      * rewrite (proj2 (Pos.eqb_neq a u) differ), taken.
        apply (found_but _ _ _ u _ _ (incl_appl _ (incl_refl _))).
        destruct (Pos.eqb_spec a v) as [-> | a_differs]; apply (IH _ _ _ c'); try easy.
        -- revert fit'. apply fits_renamed, Permutation_app_tail.
           cbn [with_hand]. rewrite place_permutation. cbn [map]. now rewrite ordered_again.
        -- intros _. now apply in_v'.
    + (* not an edge of the cycle: one of the states without it *)
      destruct must.
      { exfalso. apply out, (needed_come _ _ _ _ fit); [|exact u_come].
        apply (us_needed _ _ _ _ set_). now left. }
      apply (found_but _ _ _ u (choices v all_reached hand s us)).
      * destruct hand as [a|]; [|apply incl_refl].
        destruct (a =? u)%positive.
        -- destruct s; [destruct all_reached|]; auto using incl_refl, incl_appr.
        -- destruct (take u s) as [(b, rest)|]; auto using incl_refl, incl_appr.
      * apply (IH _ _ _ c); [exact set' | now apply fits_without | exact in_v].
Qed.

Lemma advance_sound : forall v all_reached apart, (apart = [] -> all_reached = true) ->
  forall come fresh us s c,
  ready come apart v us -> ~ In v apart -> fits come (fresh ++ apart) s c ->
  found come apart v (advance v all_reached fresh us s).
Proof.
  intros v all_reached apart full come fresh us s c set_ v_reached fit.
  unfold advance. set (s' := fold_right (fun u => place (u, u)) s fresh).
  assert (placed : Permutation s' (map alone fresh ++ s)).
  { subst s'. clear fit. induction fresh as [|u fresh IH]; [reflexivity|].
    cbn [fold_right map app]. rewrite place_permutation. now apply perm_skip. }
  apply (fits_renamed _ _ _ apart s') in fit.
  2:{ rewrite placed, !map_app, map_ordered_alone, !app_assoc.
      apply Permutation_app_tail, Permutation_app_comm. }
  destruct (take v s') as [(a, rest)|] eqn:taken.
  - apply choices_sound with c; try easy.
    revert fit. apply fits_renamed, Permutation_app_tail. now apply take_some.
  - apply choices_sound with c; try easy.
    intros _ p here. rewrite (pieces_named _ _ _ _ fit) in here.
    apply in_app_or in here as [here | here]; [now apply (take_none v s')|].
    apply in_map_iff in here as (w & <- & here).
    destruct (touches v (alone w)) eqn:E; [|reflexivity].
    apply touches_spec in E. destruct E; now subst.
Qed.

End Fits.

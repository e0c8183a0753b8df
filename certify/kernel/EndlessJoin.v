(** * Endless claims: from a state back to the one before

    SweepFits.v shows that no cycle is lost. Here is the converse: what a state can become
    can be undone. If a chain with edges to come completes a state after the choices
    at a vertex, then the chosen edges, put back into the chain, complete the state before. *)

From Coq Require Import Bool List Arith PArith Permutation Lia.
From Certify Require Import Statement Steps Question Edges Facts Sweep SweepChain SweepFits.
Import ListNotations.

(** The chain [c] completes the state [s]: its pieces are those of the state and the vertices not
    reached, and its links are edges still to come. *)
Definition completes (come : vertex * vertex -> Prop) (apart : list vertex) (s : state)
    (c : chain) : Prop :=
  Permutation (map ordered c) (map ordered s ++ map alone apart) /\
  forall e, In e (links c) -> come e.

Lemma completes_renamed : forall come apart s apart' s' c,
  Permutation (map ordered s ++ map alone apart) (map ordered s' ++ map alone apart') ->
  completes come apart s c -> completes come apart' s' c.
Proof.
  intros come apart s apart' s' c E [named linked]. split; [now rewrite named | exact linked].
Qed.

Lemma completes_more : forall (come come' : vertex * vertex -> Prop) apart s c,
  (forall e, come e -> come' e) -> completes come apart s c -> completes come' apart s c.
Proof. intros come come' apart s c more [named linked]. split; auto. Qed.

(** A piece can be cut in two that a link joins. *)
Lemma cut_piece : forall c a b x y rest,
  Permutation (map ordered c) (ordered (a, b) :: rest) ->
  exists c', Permutation (map ordered c') (ordered (a, x) :: ordered (y, b) :: rest) /\
             Permutation (links c') (ordered (x, y) :: links c).
Proof.
  intros c a b x y rest named.
  assert (middle : forall m p q p' q', snd q = snd q' -> fst p = fst p' ->
    map link (path_steps (q :: m ++ [p])) = map link (path_steps (q' :: m ++ [p']))).
  { induction m as [| z m IH]; intros p q p' q' Eq Ep.
    - cbn. unfold link. cbn. now rewrite Eq, Ep.
    - cbn [app path_steps map]. f_equal; [| now apply IH].
      unfold link. cbn. now rewrite Eq. }
  assert (here : In (ordered (a, b)) (map ordered c)) by (rewrite named; now left).
  apply in_map_iff in here as (p & same & here).
  apply in_split in here as (l & r & ->).
  assert (others : Permutation (map ordered (r ++ l)) rest).
  { apply (Permutation_cons_inv (a := ordered (a, b))). rewrite <- named, <- same.
    rewrite !map_app. cbn [map]. rewrite Permutation_app_comm. now rewrite <- Permutation_middle. }
  assert (turned : forall p q, snd p = x -> fst q = y ->
    Permutation (links (p :: q :: r ++ l)) (ordered (x, y) :: links ((fst p, snd q) :: r ++ l))).
  { intros p' q' Ex Ey.
    change (Permutation
        (ordered (snd p', fst q') :: map link (path_steps (q' :: (r ++ l) ++ [p'])))
        (ordered (x, y)
         :: map link (path_steps ((fst p', snd q') :: (r ++ l) ++ [(fst p', snd q')])))).
    rewrite Ex, Ey. now rewrite (middle (r ++ l) p' q' (fst p', snd q') (fst p', snd q')). }
  assert (around : Permutation (links (l ++ p :: r)) (links (p :: r ++ l))).
  { unfold links. apply Permutation_map. apply (cycle_steps_rotate _ l (p :: r)). }
  destruct p as [a' b']. apply ordered_same in same as [[= -> ->] | [= -> ->]].
  - exists ((a, x) :: (y, b) :: r ++ l). split.
    + cbn [map]. now rewrite others.
    + rewrite around. now apply turned.
  - exists ((b, y) :: (x, a) :: r ++ l). split.
    + cbn [map]. rewrite others, (ordered_swap b y), (ordered_swap x a). apply perm_swap.
    + rewrite around, (ordered_swap x y).
      change (Permutation
        (ordered (y, x) :: map link (path_steps ((x, a) :: (r ++ l) ++ [(b, y)])))
        (ordered (y, x) :: map link (path_steps ((b, a) :: (r ++ l) ++ [(b, a)])))).
      now rewrite (middle (r ++ l) (b, y) (x, a) (b, a) (b, a)).
Qed.

Lemma choices_back : forall v full apart, (full = true -> apart = []) ->
  forall (come : vertex * vertex -> Prop) us hand s s' c',
  (forall u must, In (u, must) us -> come (ordered (v, u))) ->
  In s' (choices v full hand s us) -> completes come apart s' c' ->
  exists c, completes come apart (with_hand v hand s) c.
Proof.
  intros v full apart full_none come us.
  induction us as [| [u must] us IH]; intros hand s s' c' coming chosen done.
  - destruct hand as [a |]; [destruct chosen |]. destruct chosen as [-> | []]. now exists c'.
  - assert (later : forall u must, In (u, must) us -> come (ordered (v, u)))
      by (intros w w_must here; apply (coming w w_must); now right).
    assert (u_come : come (ordered (v, u))) by (apply (coming u must); now left).
    assert (skipped : In s' (if must then [] else choices v full hand s us) ->
              exists c, completes come apart (with_hand v hand s) c)
      by (destruct must; [intros [] | intros here; now apply (IH hand s s' c')]).
    cbn [choices] in chosen. destruct hand as [a |]; [| now apply skipped].
    destruct (Pos.eqb_spec a u) as [-> | differ].
    + destruct s as [| p s]; [| now apply skipped].
      destruct full eqn:is_full; [| now apply skipped].
      apply in_app_or in chosen as [chosen | chosen]; [| now apply skipped].
      rewrite (full_none eq_refl) in *. exists [(v, u)]. split; [reflexivity |].
      intros e [<- | []]. unfold link. cbn [fst snd]. now rewrite ordered_swap.
    + destruct (take u s) as [[b rest] |] eqn:taken; [| now apply skipped].
      apply in_app_or in chosen as [chosen | chosen]; [| now apply skipped].
      assert (joined : exists c, completes come apart ((a, b) :: rest) c).
      { destruct (Pos.eqb_spec a v) as [-> | _].
        - now apply (IH (Some b) rest s' c').
        - destruct (IH None (place (ordered (a, b)) rest) s' c' later chosen done) as (c & fit).
          exists c. revert fit. apply completes_renamed, Permutation_app_tail.
          cbn [with_hand]. rewrite place_permutation. cbn [map]. now rewrite ordered_again. }
      destruct joined as (c & named & linked). cbn [map app] in named.
      destruct (cut_piece c a b v u _ named) as (whole & named' & linked').
      exists whole. split.
      * rewrite named'. cbn [with_hand map app]. rewrite (ordered_swap a v). apply perm_skip.
        apply take_some in taken. now rewrite taken.
      * intros e here. rewrite linked' in here. destruct here as [<- | here]; auto.
Qed.

Lemma advance_back : forall v full apart, (full = true -> apart = []) ->
  forall (come : vertex * vertex -> Prop) fresh us s s' c',
  (forall u must, In (u, must) us -> come (ordered (v, u))) ->
  In s' (advance v full fresh us s) -> completes come apart s' c' ->
  exists c, completes come (fresh ++ apart) s c.
Proof.
  intros v full apart full_none come fresh us s s' c' coming chosen done.
  unfold advance in chosen. set (s0 := fold_right (fun u => place (u, u)) s fresh) in *.
  assert (placed : Permutation s0 (map alone fresh ++ s)).
  { subst s0. clear. induction fresh as [| u fresh IH]; [reflexivity |].
    cbn [fold_right map app]. rewrite place_permutation. now apply perm_skip. }
  assert (before : exists c, completes come apart s0 c).
  { destruct (take v s0) as [[a rest] |] eqn:taken.
    - destruct (choices_back v full apart full_none come us _ _ _ _ coming chosen done)
        as (c & fit).
      exists c. revert fit. apply completes_renamed, Permutation_app_tail.
      apply take_some in taken. now rewrite taken.
    - exact (choices_back v full apart full_none come us _ _ _ _ coming chosen done). }
  destruct before as (c & fit). exists c. revert fit. apply completes_renamed.
  rewrite placed, !map_app, map_ordered_alone, !app_assoc.
  apply Permutation_app_tail, Permutation_app_comm.
Qed.

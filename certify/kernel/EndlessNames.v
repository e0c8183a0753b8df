(** * Endless claims: numbered lists and gathered states *)

From Coq Require Import Bool List Arith PArith FMapPositive Lia.
From Certify Require Import Statement Question Normal Edges Sweep SweepSound EndlessPlan.
Import ListNotations.

Lemma in_number : forall (A : Type) (l : list A) q p a,
  In (p, a) (number q l) <->
  (q <= p)%positive /\ nth_error l (Pos.to_nat p - Pos.to_nat q) = Some a.
Proof.
  intros A l. induction l as [| b l IH]; intros q p a; cbn [number In].
  - split; [easy |]. intros [_ E]. now destruct (Pos.to_nat p - Pos.to_nat q).
  - rewrite IH. split.
    + intros [[= -> ->] | [more E]].
      * split; [lia |]. now rewrite Nat.sub_diag.
      * split; [lia |]. replace (Pos.to_nat p - Pos.to_nat q)
          with (S (Pos.to_nat p - Pos.to_nat (Pos.succ q))) by lia. exact E.
    + intros [more E]. destruct (Pos.eqb_spec q p) as [-> | differ].
      * left. rewrite Nat.sub_diag in E. now injection E as ->.
      * right. split; [lia |].
        replace (Pos.to_nat p - Pos.to_nat q)
          with (S (Pos.to_nat p - Pos.to_nat (Pos.succ q))) in E by lia. exact E.
Qed.

Lemma number_names : forall (A : Type) (l : list A) q,
  map fst (number q l) = map Pos.of_nat (seq (Pos.to_nat q) (length l)).
Proof.
  intros A l. induction l as [| b l IH]; intros q; [reflexivity |].
  cbn [number map length seq]. rewrite IH. f_equal; [cbn [fst]; lia |]. do 2 f_equal. lia.
Qed.

Lemma number_items : forall (A : Type) (l : list A) q, map snd (number q l) = l.
Proof. intros A l. induction l as [| a l IH]; intros q; cbn; [| rewrite IH]; reflexivity. Qed.

Lemma number_names_distinct : forall (A : Type) (l : list A) q, NoDup (map fst (number q l)).
Proof.
  intros A l q. rewrite number_names. apply distinct_map; [| apply seq_NoDup].
  intros i j i_in j_in. rewrite in_seq in i_in, j_in. lia.
Qed.

(** ** Gathering states *)

Lemma collect_only : forall c s t, In t (snd (collect c s)) -> t = s \/ In t (snd c).
Proof.
  intros [m all] s t. unfold collect. cbn [snd].
  destruct (PositiveMap.find _ _); [destruct (existsb _ _) |]; cbn [snd In]; intuition.
Qed.

Lemma in_gather : forall f ss t, In t (gather f ss) <-> exists s, In s ss /\ In t (f s).
Proof.
  intros f ss t. split.
  2:{ intros (s & here & t_here). now apply (collect_all f ss s). }
  unfold gather.
  assert (lists : forall l c, In t (snd (fold_left collect l c)) -> In t l \/ In t (snd c)).
  { induction l as [| s l IH]; intros c here; [now right |].
    cbn [fold_left] in here. apply IH in here as [here | here]; [left; now right |].
    apply collect_only in here as [-> | here]; [left; now left | now right]. }
  assert (all : forall c, In t (snd (fold_left (fun c s => fold_left collect (f s) c) ss c)) ->
            (exists s, In s ss /\ In t (f s)) \/ In t (snd c)).
  { induction ss as [| s ss IH]; intros c here; [now right |].
    cbn [fold_left] in here. apply IH in here as [(s' & here & t_here) | here].
    - left. exists s'. split; [now right | exact t_here].
    - apply lists in here as [here | here]; [| now right].
      left. exists s. split; [now left | exact here]. }
  intros here. now destruct (all _ here).
Qed.
